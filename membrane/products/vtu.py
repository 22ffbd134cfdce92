"""modes.vtu: the mode shapes on the curved head, for ParaView and other VTK programs."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from membrane.records.arrays import Floats, Ints
from membrane.records.membrane import Field
from membrane.records.spectrum import Spectrum
from membrane.subdivision import Subdivision, subdivide
from membrane.triangle import lattice

FILE = "modes.vtu"

Arrays = Mapping[str, NDArray[np.generic]]


@dataclass(frozen=True)
class Options:
    """How the shapes are written.

    lagrange : False cuts each curved triangle into flat ones, as many along a side as the
        degree; True writes VTK's Lagrange triangles, which hold the modes exactly
    """

    lagrange: bool = False


def write(spectrum: Spectrum, folder: Path, options: Options) -> None:
    """Write modes.vtu with point arrays mode_01, mode_02, ... and what each cell is made of.

    Amplitudes are those of the mass-normalised modes, kg^(-1/2). Cells carry their region,
    and in their middle the areal density, kg/m^2, and the tension xx, yy and xy, N/m. The
    names of the regions stand in summary.json under mesh.regions, in the order of their
    numbers.
    """
    space = spectrum.modes.space
    # at this many parts the equispaced points hold both the modes and the geometry exactly
    divided = subdivide(space.mesh, max(space.degree, space.mesh.order))
    values = divided.values(space, spectrum.modes.vectors)
    cells, owner = _lagrange(divided) if options.lagrange else _flat(divided)
    points, region = divided.positions(space.mesh), space.mesh.region[owner]
    write_vtu(
        folder / FILE,
        points,
        "VTK_LAGRANGE_TRIANGLE" if options.lagrange else "triangle",
        cells,
        {mode_name(number, values.shape[1]): values[:, number] for number in _range(values)},
        {"region": region, **_material(spectrum, region, points[:, cells].mean(axis=1))},
    )


def mode_name(index: int, count: int) -> str:
    """Name of the array of a mode, its number padded so that names sort."""
    return f"mode_{index + 1:0{max(2, len(str(count)))}d}"


def write_vtu(
    path: Path, points: Floats, kind: str, cells: Ints, point_data: Arrays, cell_data: Arrays
) -> None:
    """Write one block of cells, compressed.

    points : (2, n) metres
    kind : the cells' type as meshio spells it
    cells : (n_per_cell, n_cells), in VTK's order
    """
    import meshio

    mesh = meshio.Mesh(
        np.column_stack([points.T, np.zeros(points.shape[1])]),
        [(kind, np.ascontiguousarray(cells.T))],
        point_data={name: np.ascontiguousarray(data) for name, data in point_data.items()},
        cell_data={name: [np.ascontiguousarray(data)] for name, data in cell_data.items()},
    )
    meshio.write(path, mesh, file_format="vtu", binary=True, compression="zlib")


def _material(spectrum: Spectrum, region: Ints, middles: Floats) -> Arrays:
    """Areal density (n,) and tension (n, 3) in the middles (2, n) of cells."""
    density, tension = np.empty(region.size), np.empty((region.size, 3))
    for number, name in enumerate(spectrum.modes.space.mesh.region_names):
        here = region == number
        places = middles[:, here]
        density[here] = spectrum.membrane.at(Field.AREAL_DENSITY, name, places)
        tensors = spectrum.membrane.at(Field.TENSION, name, places)
        tension[here] = tensors[:, [0, 1, 0], [0, 1, 1]]
    return {"areal_density": density, "tension_xx_yy_xy": tension}


def _range(values: Floats) -> range:
    return range(values.shape[1])


def _flat(divided: Subdivision) -> tuple[Ints, Ints]:
    """Flat triangles and the mesh triangle that each lies in."""
    each = divided.lattice.triangles.shape[1]
    return divided.triangles, np.arange(divided.triangles.shape[1]) // each


def _lagrange(divided: Subdivision) -> tuple[Ints, Ints]:
    """Lagrange triangles and the mesh triangle that each is."""
    return divided.numbers[vtk_order(divided.lattice.parts)], np.arange(divided.numbers.shape[1])


@cache
def vtk_order(degree: int) -> Ints:
    """Lattice indices in VTK's order of a Lagrange triangle's nodes.

    Corners, then the sides 0-1, 1-2 and 2-0, then the inner triangle in the same way
    (VTK, vtkHigherOrderTriangle::BarycentricIndex).
    """
    points = np.rint(lattice(degree).points * degree).astype(int).T.tolist()
    index = {tuple(point): number for number, point in enumerate(points)}
    return np.array([index[place] for place in _shells(degree, 0)], dtype=np.int64)


def _shells(degree: int, depth: int) -> list[tuple[int, int]]:
    """Places (i, j) of a lattice triangle of a degree, ``depth`` steps in, and within."""
    if degree < 0:
        return []
    if degree == 0:
        return [(depth, depth)]
    corners = [(0, 0), (degree, 0), (0, degree)]
    steps = range(1, degree)
    sides = [(k, 0) for k in steps] + [(degree - k, k) for k in steps]
    sides += [(0, degree - k) for k in steps]
    here = [(i + depth, j + depth) for i, j in corners + sides]
    return here + _shells(degree - 3, depth + 1)
