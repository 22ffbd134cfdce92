"""The spectra of the shortest studies against published and closed-form values.

``spectra.json`` names the source of each case beside its values.
"""

from __future__ import annotations

import json
from functools import cache
from pathlib import Path

import numpy as np
import pytest

from membrane import run, study_from
from tests.reference.cases import CASES

SPECTRA = json.loads(Path(__file__).with_name("spectra.json").read_text())["cases"]
WANTED = 20

BAR = 1e-9
"""For the relative error of an eigenvalue, with no mesh or degree option set."""

ALL_FREE = {name for name in CASES if name.endswith("_free") and "hole" not in name} | {
    name for name in CASES if name.endswith("inN_outN")
}

NOT_PROVEN = {"disc_rho_r2", "rect_linear_density_a1"}

pytestmark = pytest.mark.slow


@cache
def solved(name):
    return run(study_from(CASES[name]))


def exact(name):
    return np.array([float(value) for value in SPECTRA[name]["values"]])


def groups(values):
    """How many values each group of equal ones has."""
    breaks = np.nonzero(np.diff(values) > 1e-9 * values[1:])[0] + 1
    return [len(group) for group in np.split(values, breaks)]


def test_every_case_has_its_reference():
    assert set(CASES) == set(SPECTRA)
    assert len(CASES) == 40


@pytest.mark.parametrize("name", CASES)
def test_twenty_eigenvalues(name):
    found, reference = solved(name).modes.eigenvalues[:WANTED], exact(name)[:WANTED]
    assert len(found) == WANTED
    error = np.abs(found - reference) / np.where(reference > 0, reference, 1.0)
    assert error.max() <= BAR


@pytest.mark.parametrize("name", CASES)
def test_multiplicities(name):
    clusters = solved(name).modes.clusters
    expected = groups(exact(name)[: len(clusters)])
    assert np.unique(clusters, return_counts=True)[1].tolist() == expected


@pytest.mark.parametrize("name", CASES)
def test_exact_value_lies_in_the_bracket(name):
    spectrum = solved(name)
    assert spectrum.complete
    assert spectrum.mesh_facts["accuracy_met"]
    assert max(partial.bracket_cents or 0.0 for partial in spectrum.partials) <= 0.01
    label = "estimated" if name in NOT_PROVEN else "guaranteed"
    assert {partial.bracket for partial in spectrum.partials} == {label}
    for partial, value in zip(spectrum.partials, exact(name), strict=False):
        frequency = np.sqrt(value) / (2 * np.pi)
        assert partial.low * (1 - 1e-12) <= frequency <= partial.high * (1 + 1e-12)


@pytest.mark.parametrize("name", CASES)
def test_only_a_head_that_nothing_holds_has_a_mode_at_zero(name):
    spectrum = solved(name)
    values, shapes = spectrum.modes.eigenvalues, spectrum.modes.vectors
    if name in ALL_FREE:
        assert values[0] == 0.0
        assert np.ptp(shapes[:, 0]) == 0.0
        values = values[1:]
    assert (values > 0.0).all()


@pytest.mark.parametrize("name", CASES)
def test_courant(name):
    """The n-th mode has at most n nodal domains; of equal ones the first counts.

    R. Courant 1923; Courant & Hilbert, Methods of Mathematical Physics I, VI.6.
    """
    spectrum = solved(name)
    clusters = spectrum.modes.clusters
    for partial in spectrum.partials:
        first = int(np.argmax(clusters == partial.cluster)) + 1
        assert 1 <= partial.nodal.domains <= first


def test_the_isospectral_pair_agrees_to_all_printed_digits():
    """C. Gordon, D. Webb & S. Wolpert, Invent. Math. 110 (1992) 1."""
    one, two = (solved(name).frequencies for name in ("gww1_fixed", "gww2_fixed"))
    assert len(one) == len(two) == WANTED
    assert np.abs(1200 * np.log2(one / two)).max() < 0.01
