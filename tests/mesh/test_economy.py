"""Very many small shapes take a lower degree; nothing else does."""

import numpy as np
import pytest

from membrane import run, study_from
from membrane.mesh.economy import suited_resolution, unknowns
from membrane.mesh.resolution import first_resolution
from membrane.records.study import ModesWanted
from tests import zoo


def dots(across, **more):
    """A square grid of dots on a disc."""
    places = np.linspace(-0.6, 0.6, across)
    patches = [
        {"name": f"dot{i}and{j}", "shape": "disc", "diameter": 0.5 / max(across, 4), "at": [x, y]}
        for i, x in enumerate(places.tolist())
        for j, y in enumerate(places.tolist())
    ]
    return {**zoo.DISC, "patches": [{**patch, "added_density": 3.0} for patch in patches], **more}


def suited(keys):
    with zoo.drawn(keys) as (kernel, study, outline, membrane):
        return suited_resolution(kernel, outline, membrane, study.modes)


@pytest.mark.parametrize("keys", [zoo.DISC, zoo.L_SHAPE, zoo.PATCHED, dots(2)])
def test_few_shapes_keep_the_first_degree(keys):
    assert suited(keys) == first_resolution(ModesWanted())


def test_many_dots_take_a_lower_degree():
    chosen = suited(dots(12))
    assert chosen.degree < first_resolution(ModesWanted()).degree
    assert chosen.degree_is_free


def test_a_degree_that_is_set_is_kept():
    assert suited(dots(12, modes={"degree": 8})).degree == 8


def test_unknowns_of_a_head_without_curves_follow_weyl():
    """2/sqrt(3) p^2 A (k/phase)^2: equilateral triangles, each with p^2/2 unknowns."""
    resolution = first_resolution(ModesWanted())
    found = unknowns(resolution, 100.0, np.empty(0), np.empty(0))
    assert found == pytest.approx(2 / 3**0.5 * 64 * 100.0 / resolution.phase**2)


@pytest.mark.slow
def test_the_lower_degree_is_as_exact_as_was_asked():
    """Against the first degree on the same dots, in cents."""
    coarse, fine = run(study_from(dots(5))), run(study_from(dots(5, modes={"degree": 8})))
    assert coarse.mesh_facts["degree"] == 4
    assert fine.mesh_facts["unknowns"] > 3 * coarse.mesh_facts["unknowns"]
    apart = 1200 * np.log2(coarse.frequencies / fine.frequencies)
    assert np.abs(apart).max() < 0.001
    for partial, frequency in zip(coarse.partials, fine.frequencies, strict=True):
        assert partial.low <= frequency <= partial.high


@pytest.mark.slow
def test_two_hundred_dots_are_solved_as_exactly_as_asked():
    spectrum = run(study_from(dots(14)))
    assert spectrum.complete
    assert spectrum.mesh_facts["accuracy_met"]
    assert spectrum.mesh_facts["unknowns"] < 120_000
