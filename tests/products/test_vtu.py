"""modes.vtu read back by ParaView's reader equals the modes."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from vtkmodules.vtkCommonCore import mutable
from vtkmodules.vtkCommonDataModel import VTK_LAGRANGE_TRIANGLE, VTK_TRIANGLE

from membrane.pipeline import run
from membrane.products import vtu
from membrane.records.spectrum import Spectrum
from membrane.study import study_from
from membrane.triangle import lattice
from tests.products.vtk_reader import arrays_of, points_of, read_grid
from tests.zoo import SQUARE


def inside(count: int) -> np.ndarray:
    """(count, 2) random reference coordinates in a triangle."""
    found = np.random.default_rng(1).random((count, 2))
    return np.where(found.sum(axis=1, keepdims=True) > 1.0, 1.0 - found, found)


def interpolated(grid, count: int) -> tuple[np.ndarray, np.ndarray]:
    """VTK's own position (2, count) and first seven modes (7, count) in random cells."""
    cells = np.random.default_rng(2).integers(grid.GetNumberOfCells(), size=count)
    arrays = arrays_of(grid.GetPointData())
    positions, values = [], []
    for number, (r, s) in zip(cells.tolist(), inside(count).tolist(), strict=True):
        cell = grid.GetCell(number)
        weights, place = [0.0] * cell.GetNumberOfPoints(), [0.0, 0.0, 0.0]
        cell.EvaluateLocation(mutable(0), [r, s, 0.0], place, weights)
        ids = [cell.GetPointId(i) for i in range(cell.GetNumberOfPoints())]
        positions.append(place[:2])
        values.append([np.dot(weights, arrays[name][ids]) for name in sorted(arrays)])
    return np.array(positions).T, np.array(values).T


@pytest.fixture(scope="module", params=["patched", "free"])
def spectrum(request: pytest.FixtureRequest) -> Spectrum:
    return request.getfixturevalue(request.param)


def test_flat_triangles_hold_the_modes_at_their_corners(spectrum: Spectrum, tmp_path: Path) -> None:
    vtu.write(spectrum, tmp_path, vtu.Options())
    grid = read_grid(tmp_path / vtu.FILE)
    space = spectrum.modes.space
    assert grid.GetNumberOfCells() == space.mesh.size * max(space.degree, space.mesh.order) ** 2
    assert {grid.GetCellType(i) for i in range(grid.GetNumberOfCells())} == {VTK_TRIANGLE}
    x, y, z = points_of(grid)
    assert not z.any()
    arrays = arrays_of(grid.GetPointData())
    assert sorted(arrays) == [f"mode_{i + 1:02d}" for i in range(len(spectrum.partials))]
    expected = spectrum.modes.at(np.stack([x, y]))
    scale = np.abs(expected).max()
    for found, exact in zip(arrays.values(), expected, strict=True):
        np.testing.assert_allclose(found, exact, atol=1e-11 * scale)


def test_flat_triangles_are_close_to_the_modes_between(spectrum: Spectrum, tmp_path: Path) -> None:
    vtu.write(spectrum, tmp_path, vtu.Options())
    positions, values = interpolated(read_grid(tmp_path / vtu.FILE), 200)
    exact = spectrum.modes.at(positions)
    on_head = np.isfinite(exact).all(axis=0)
    assert on_head.mean() > 0.95
    error = np.abs(values - exact)[:, on_head].max() / np.abs(exact[:, on_head]).max()
    assert 1e-8 < error < 1e-2


def test_lagrange_triangles_are_the_modes(spectrum: Spectrum, tmp_path: Path) -> None:
    vtu.write(spectrum, tmp_path, vtu.Options(lagrange=True))
    grid = read_grid(tmp_path / vtu.FILE)
    assert grid.GetNumberOfCells() == spectrum.modes.space.mesh.size
    assert grid.GetCellType(0) == VTK_LAGRANGE_TRIANGLE
    positions, values = interpolated(grid, 200)
    exact = spectrum.modes.at(positions)
    assert np.isfinite(exact).mean() > 0.95
    np.testing.assert_allclose(
        values[np.isfinite(exact)],
        exact[np.isfinite(exact)],
        atol=1e-10 * np.nanmax(np.abs(exact)),
    )


@pytest.mark.parametrize("lagrange", [False, True])
def test_no_point_is_lost_or_doubled(spectrum: Spectrum, tmp_path: Path, lagrange: bool) -> None:
    vtu.write(spectrum, tmp_path, vtu.Options(lagrange=lagrange))
    grid = read_grid(tmp_path / vtu.FILE)
    places = np.round(points_of(grid).T, 9)
    assert len(np.unique(places, axis=0)) == len(places)
    used = {
        grid.GetCell(i).GetPointId(k)
        for i in range(grid.GetNumberOfCells())
        for k in range(grid.GetCell(i).GetNumberOfPoints())
    }
    assert used == set(range(grid.GetNumberOfPoints()))


def test_regions_are_numbered_as_in_the_mesh(patched: Spectrum, tmp_path: Path) -> None:
    vtu.write(patched, tmp_path, vtu.Options(lagrange=True))
    region = arrays_of(read_grid(tmp_path / vtu.FILE).GetCellData())["region"]
    np.testing.assert_array_equal(region, patched.modes.space.mesh.region)
    vtu.write(patched, tmp_path, vtu.Options())
    grid = read_grid(tmp_path / vtu.FILE)
    region = arrays_of(grid.GetCellData())["region"]
    names = np.array(patched.modes.space.mesh.region_names)[region]
    x, y, _ = points_of(grid)
    for number in range(0, grid.GetNumberOfCells(), 50):
        ids = [grid.GetCell(number).GetPointId(k) for k in range(3)]
        centre = np.hypot(x[ids].mean(), y[ids].mean())
        assert (names[number] != "head") == (centre < 0.4)


@pytest.mark.parametrize("lagrange", [False, True])
def test_cells_carry_what_they_are_made_of(tmp_path: Path, lagrange: bool) -> None:
    woven = {"along": "2 kN/m", "across": "1 kN/m", "angle": "90 deg"}
    varying = {"formula": "0.2 + x", "unit": "kg/m^2"}
    spectrum = run(study_from({**SQUARE, "head": {"areal_density": varying, "tension": woven}}))
    vtu.write(spectrum, tmp_path, vtu.Options(lagrange=lagrange))
    grid = read_grid(tmp_path / vtu.FILE)
    cells, (x, _, _) = arrays_of(grid.GetCellData()), points_of(grid)
    expected = np.broadcast_to([1e3, 2e3, 0.0], (grid.GetNumberOfCells(), 3))
    np.testing.assert_allclose(cells["tension_xx_yy_xy"], expected, atol=1e-9)
    for number in range(0, grid.GetNumberOfCells(), 20):
        ids = [grid.GetCell(number).GetPointId(k) for k in range(3)]
        assert cells["areal_density"][number] == pytest.approx(0.2 + x[ids].mean(), rel=1e-9)


@pytest.mark.parametrize("degree", range(1, 13))
def test_vtk_knows_our_order_of_lagrange_nodes(degree: int) -> None:
    # VTK's own barycentric indices of a Lagrange triangle's nodes
    from vtkmodules.vtkCommonDataModel import vtkHigherOrderTriangle

    places = np.rint(lattice(degree).points[:, vtu.vtk_order(degree)] * degree).astype(int)
    for index in range(places.shape[1]):
        barycentric = [0, 0, 0]
        vtkHigherOrderTriangle.BarycentricIndex(index, barycentric, degree)
        assert tuple(barycentric[:2]) == tuple(places[:, index])


def test_names_sort_in_the_order_of_the_modes() -> None:
    names = [vtu.mode_name(i, 120) for i in range(120)]
    assert names == sorted(names)
    assert vtu.mode_name(0, 20) == "mode_01"
