"""Small studies and meshes that many tests share."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from typing import Any

import numpy as np

from membrane.coefficients import coefficients
from membrane.kernel import Kernel
from membrane.mesh import Resolution, make_mesh
from membrane.outline import draw
from membrane.records.membrane import Membrane
from membrane.records.mesh import Mesh
from membrane.records.outline import Outline
from membrane.records.study import Study
from membrane.study import study_from

HEAD = {"areal_density": 1.0, "tension": 1.0}
DISC = {"outline": {"shape": "disc", "diameter": 2.0}, "head": HEAD}
SQUARE = {"outline": {"shape": "rectangle", "width": 1.0, "height": 1.0}, "head": HEAD}
L_SHAPE = {
    "outline": {
        "shape": "polygon",
        "corners": [[0, 0], [1, 0], [1, 1], [-1, 1], [-1, -1], [0, -1]],
    },
    "head": HEAD,
}
PATCHED = {
    **DISC,
    "patches": [{"name": "paste", "shape": "disc", "diameter": 0.8, "added_density": 8.77}],
}


@dataclass(frozen=True)
class Prepared:
    """Everything up to the mesh of one study."""

    study: Study
    outline: Outline
    membrane: Membrane
    mesh: Mesh


@contextmanager
def drawn(keys: dict[str, Any]) -> Iterator[tuple[Kernel, Study, Outline, Membrane]]:
    """An open kernel session with a study's outline and membrane in it."""
    study = study_from(keys)
    with Kernel.session() as kernel:
        outline = draw(kernel, study)
        yield kernel, study, outline, coefficients(study, outline)


def prepared(
    keys: dict[str, Any],
    degree: int = 6,
    phase: float = 3.0,
    tolerance: float = 1e-8,
    *,
    fans: bool = True,
) -> Prepared:
    """A study's mesh at a given resolution."""
    with drawn(keys) as (kernel, study, outline, membrane):
        resolution = Resolution(degree, phase, tolerance)
        mesh = make_mesh(kernel, outline, membrane, study.modes, resolution, fans=fans)
    return Prepared(study, outline, membrane, mesh)


def straight_square() -> Mesh:
    """Two triangles that make the unit square, without any kernel."""
    vertices = np.array([[0.0, 1.0, 0.0, 1.0], [0.0, 0.0, 1.0, 1.0]])
    triangles = np.array([[0, 1], [1, 2], [2, 3]])
    sides = np.array([[0, 1, 2, 0], [1, 3, 3, 2]])
    return Mesh(
        vertices=vertices,
        triangles=triangles,
        nodes=vertices[:, triangles],
        order=1,
        region_names=("head",),
        region=np.zeros(2, dtype=np.int64),
        edges={"rim": sides},
    )
