"""A rescaled pencil is the one that would be assembled, or there is none."""

from __future__ import annotations

import pytest

from membrane import study_from
from membrane.coefficients import coefficients
from membrane.kernel import Kernel
from membrane.mesh import make_mesh, suited_resolution
from membrane.outline import draw
from membrane.pencil import assemble, rescaled

KEYS = {
    "outline": {"shape": "disc", "diameter": 0.4},
    "patches": [{"name": "paste", "shape": "disc", "diameter": 0.1, "added_density": 2.0}],
    "head": {"areal_density": 0.3, "tension": {"along": 1e3, "across": 2e3}, "bedding": 10.0},
    "edges": {"rim": {"support": "elastic", "stiffness": 1e4, "mass": 0.1}},
    "modes": {"count": 2, "accuracy": "1 cent"},
}


def changed(**sections):
    return study_from(
        {
            key: value | sections.get(key, {}) if isinstance(value, dict) else value
            for key, value in KEYS.items()
        }
    )


@pytest.fixture(scope="module")
def head():
    study = study_from(KEYS)
    with Kernel.session() as kernel:
        outline = draw(kernel, study)
        membrane = coefficients(study, outline)
        resolution = suited_resolution(kernel, outline, membrane, study.modes)
        mesh = make_mesh(kernel, outline, membrane, study.modes, resolution)
    return outline, membrane, mesh, assemble(membrane, mesh, 4)


@pytest.mark.parametrize(
    "sections",
    [
        {"head": {"areal_density": 0.7, "bedding": 3.0}},
        {"head": {"tension": {"along": 5e3, "across": 1e3}}},
        {"edges": {"rim": {"support": "elastic", "stiffness": 7.0, "mass": 3.0}}},
    ],
)
def test_other_numbers(head, sections):
    outline, old, mesh, pencil = head
    new = coefficients(changed(**sections), outline)
    found, assembled = rescaled(pencil, old, new), assemble(new, mesh, 4)
    for got, wanted, before in (
        (found.K, assembled.K, pencil.K),
        (found.M, assembled.M, pencil.M),
    ):
        assert abs(got - wanted).max() < 1e-13 * abs(wanted).max()
        assert got.shape == before.shape
    assert abs(found.K - pencil.K).max() + abs(found.M - pencil.M).max() > 0.0
    assert found.moves_rigidly == assembled.moves_rigidly


def test_more_than_numbers(head):
    outline, old, _, pencil = head
    turned = changed(head={"tension": {"along": 1e3, "across": 2e3, "angle": 0.1}})
    held = study_from(KEYS | {"edges": {"rim": {"support": "fixed"}}})
    for study in (turned, held):
        assert rescaled(pencil, old, coefficients(study, outline)) is None
