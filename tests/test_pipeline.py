"""The stages in order: accuracy is reached, limits are kept, the user is told."""

import numpy as np
import pytest
from scipy.special import jn_zeros

from membrane import pipeline, run, study_from, write
from membrane.errors import MeshError, OutlineError, SolveError, StudyError
from membrane.mesh import Resolution
from membrane.products import summary
from tests import zoo


def solved(keys, **modes):
    return run(study_from({**keys, "modes": modes}))


def test_up_to_finds_every_mode_below_and_none_above():
    """j_{m,n}/2 pi below 1.2 Hz: DLMF 10.21 by scipy, two of each for m > 0."""
    zeros = [z for m in range(12) for z in list(jn_zeros(m, 6)) * (1 if m == 0 else 2)]
    exact = sorted(z / (2 * np.pi) for z in zeros if z / (2 * np.pi) < 1.2)
    spectrum = solved(zoo.DISC, up_to=1.2)
    np.testing.assert_allclose(spectrum.frequencies, exact, rtol=1e-9)
    assert len(exact) == 10


def test_up_to_below_the_first_mode():
    with pytest.raises(SolveError, match=r"no mode lies below 0\.1 Hz"):
        solved(zoo.DISC, up_to=0.1)


def test_a_coarse_start_is_refined_until_the_accuracy_is_met(monkeypatch):
    meshes = []
    make_mesh = pipeline.make_mesh

    def counted(*arguments, fans):
        mesh = make_mesh(*arguments, fans=fans)
        if fans:  # others are for the proofs
            meshes.append(mesh.size)
        return mesh

    monkeypatch.setattr(pipeline, "suited_resolution", lambda *_: Resolution(4, 3.0, 1e-3))
    monkeypatch.setattr(pipeline, "make_mesh", counted)
    spectrum = solved(zoo.L_SHAPE, count=4, accuracy=0.05)
    assert len(meshes) > 1
    assert meshes == sorted(meshes)
    assert spectrum.mesh_facts["accuracy_met"]
    assert max(p.bracket_cents for p in spectrum.partials) <= 0.05


def test_brackets_of_a_head_with_fans_are_proven_on_a_mesh_without():
    """9.6397238440219: T. Betcke & L. N. Trefethen, SIAM Review 47 (2005) 469."""
    spectrum = solved(zoo.L_SHAPE, count=4)
    first = spectrum.partials[0]
    assert spectrum.modes.space.mesh.has_fans
    assert {partial.bracket for partial in spectrum.partials} == {"guaranteed"}
    assert spectrum.modes.eigenvalues[0] == pytest.approx(9.6397238440219, rel=1e-8)
    assert first.low <= np.sqrt(9.6397238440219) / (2 * np.pi) <= first.high
    for partial in spectrum.partials:
        assert partial.low <= partial.frequency <= partial.high


def test_what_falls_short_is_said(monkeypatch):
    monkeypatch.setattr(pipeline, "suited_resolution", lambda *_: Resolution(4, 3.0, 1e-3))
    monkeypatch.setattr(pipeline, "MESHES", 1)
    spectrum = solved(zoo.L_SHAPE, count=4, accuracy=1e-6)
    assert not spectrum.mesh_facts["accuracy_met"]
    assert max(p.bracket_cents for p in spectrum.partials) > 1e-6


def test_interval_of_an_elastic_disc_is_narrower_for_more_accuracy():
    elastic = {**zoo.DISC, "edges": {"rim": {"support": "elastic", "stiffness": 3.0}}}
    loose, tight = (solved(elastic, count=5, accuracy=a) for a in (1.0, 1e-4))
    widths = [max(p.bracket_cents for p in s.partials) for s in (loose, tight)]
    assert widths[1] <= 1e-4
    assert widths[0] <= 1.0


@pytest.mark.parametrize("modes", [{"count": 1}, {"up_to": 0.01}])
def test_a_free_head_may_be_asked_for_its_rigid_mode_alone(modes):
    free = {
        **zoo.SQUARE,
        "edges": {n: {"support": "free"} for n in ["left", "right", "bottom", "top"]},
    }
    (rigid,) = solved(free, **modes).partials
    assert (rigid.frequency, rigid.ratio, rigid.note) == (0.0, None, None)


def test_a_slip_of_the_unit_is_refused_before_it_takes_hours():
    with pytest.raises(MeshError, match="ask for fewer modes, a lower up_to"):
        solved(zoo.DISC, up_to=1e6)


def test_plan_draws_the_outline_and_finds_shapes_that_do_not_fit():
    planned = pipeline.plan(study_from(zoo.PATCHED))
    assert abs(planned.area - np.pi) < 1e-9
    assert planned.degree == 8
    assert 500 < planned.unknowns < 5000
    away = {"name": "away", "shape": "disc", "diameter": 0.1, "at": [3.0, 0.0], "tension": 2.0}
    with pytest.raises(OutlineError, match="wholly outside"):
        pipeline.plan(study_from({**zoo.DISC, "patches": [away]}))


def test_ratio_to_a_mode_that_is_not_there():
    with pytest.raises(StudyError, match="mode 7 is not among the"):
        solved(zoo.DISC, up_to=0.7, ratio_to=7)


def test_bedding_shifts_every_eigenvalue_by_bedding_over_density():
    """K gains kappa/rho times M, exactly."""
    bed = {**zoo.SQUARE, "head": {"areal_density": 2.0, "tension": 1.0, "bedding": 10.0}}
    bare = {**zoo.SQUARE, "head": {"areal_density": 2.0, "tension": 1.0}}
    with_bed, without = (solved(keys, count=6).modes.eigenvalues for keys in (bed, bare))
    np.testing.assert_allclose(with_bed, without + 5.0, rtol=1e-11)


def test_rim_mass_lowers_every_mode_of_an_elastic_disc_as_bessel_says():
    """k J'(k) + (beta - mu k^2) J(k) = 0 for mode (0,n): from T u_r = -(beta - mu w^2) u."""
    from scipy.optimize import brentq
    from scipy.special import j0, j1

    beta, mu = 2.0, 0.3
    edge = {"support": "elastic", "stiffness": beta, "mass": mu}
    first = solved({**zoo.DISC, "edges": {"rim": edge}}, count=1).modes.eigenvalues[0]
    k = brentq(lambda k: -k * j1(k) + (beta - mu * k * k) * j0(k), 0.5, 2.0)
    assert abs(first / k**2 - 1) < 1e-9


def test_a_spectrum_is_shown_in_one_line():
    spectrum = solved(zoo.SQUARE, count=1)
    assert repr(spectrum) == "<Spectrum of a study: 1 modes, 0.707107 to 0.707107 Hz>"


def test_stages_are_told_in_order():
    told = []
    run(study_from({**zoo.SQUARE, "modes": {"count": 2}}), told.append)
    assert told == ["outline", "mesh", "assembly", "modes", "bounds", "nodal lines"]


def test_write_writes_what_is_wanted(tmp_path):
    keys = {**zoo.SQUARE, "modes": {"count": 2}, "products": {"write": ["table"]}}
    write(run(study_from(keys)), tmp_path)
    found = sorted(path.name for path in tmp_path.iterdir())
    assert found == ["modes.csv", "summary.json", "table.txt"]
    assert summary.read(tmp_path)["files"] == found


def test_all_eigensolvers_agree():
    spectra = [
        solved(zoo.SQUARE, count=6, eigensolver=name).modes.eigenvalues
        for name in ("shift_invert", "arpack_superlu", "dense")
    ]
    np.testing.assert_allclose(spectra[1], spectra[0], rtol=1e-11)
    np.testing.assert_allclose(spectra[2], spectra[0], rtol=1e-11)


def test_a_mesh_that_cannot_be_refined_keeps_its_result(monkeypatch):
    make_mesh = pipeline.make_mesh
    made = []

    def once(*arguments, **keywords):
        made.append(arguments)
        if len(made) > 1:
            raise MeshError("as if it folded")
        return make_mesh(*arguments, **keywords)

    monkeypatch.setattr(pipeline, "suited_resolution", lambda *_: Resolution(4, 3.0, 1e-3))
    monkeypatch.setattr(pipeline, "make_mesh", once)
    spectrum = solved(zoo.SQUARE, count=4, accuracy=1e-5)
    assert len(made) == 2
    assert not spectrum.mesh_facts["accuracy_met"]
    assert {partial.bracket for partial in spectrum.partials} == {"guaranteed"}
