"""Nodal patterns of whole heads against Bessel functions and sines."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.special import jn_zeros, jnp_zeros

from membrane import pipeline
from membrane.nodal import nodal_patterns
from membrane.nodal.patterns import length
from membrane.records.spectrum import Spectrum
from membrane.records.study import Edge, Support
from membrane.study import study_from
from tests import zoo
from tests.synthetic import modes_of

FREE = {"rim": Edge(Support.FREE)}
SECTOR = {"outline": {"shape": "sector", "radius": 1.0, "angle": "270 deg"}, "head": zoo.HEAD}


def solved(keys: dict, count: int = 20) -> Spectrum:
    return pipeline.run(study_from({**keys, "modes": {"count": count}}))


def sorted_labels(zeros, count: int) -> list[tuple[int, int]]:
    """(m, n) in rising order of the n-th of the zeros of order m, twice for m > 0."""
    found = [(z, m, n) for m in range(20) for n, z in zeros(m)]
    twice = [(m, n) for z, m, n in sorted(found) for _ in range(1 + (m > 0))]
    return twice[:count]


@pytest.fixture(scope="module")
def disc() -> Spectrum:
    return solved(zoo.DISC)


def test_a_fixed_disc_is_named_as_the_zeros_of_bessel_functions(disc: Spectrum) -> None:
    # scipy's zeros of J_m, DLMF 10.21
    labels = [(p.nodal.diameters, p.nodal.circles) for p in disc.partials]
    zeros = sorted_labels(lambda m: enumerate(jn_zeros(m, 10), 1), len(labels))
    assert labels == zeros
    assert labels[:6] == [(0, 1), (1, 1), (1, 1), (2, 1), (2, 1), (0, 2)]


def test_a_fixed_disc_has_the_domains_that_its_name_says(disc: Spectrum) -> None:
    for partial in disc.partials:
        m, n = partial.nodal.diameters, partial.nodal.circles
        assert partial.nodal.domains == max(2 * m, 1) * n


def test_lengths_on_a_disc(disc: Spectrum) -> None:
    checked = 0
    for partial in disc.partials:
        m, n = partial.nodal.diameters, partial.nodal.circles
        zeros = jn_zeros(m, n)
        exact = 2.0 * m + 2.0 * np.pi * np.sum(zeros[:-1]) / zeros[-1]
        # lines that cross are drawn a little short where they meet: the mode is known less well
        tolerance = {0: 1e-6, 1: 1e-8 if n == 1 else 2e-3}.get(m, 6e-3 if m < 4 else 3e-2)
        assert abs(partial.nodal.length - exact) <= tolerance * exact
        checked += 1
    assert checked >= 20


def test_every_point_lies_on_the_head_and_on_the_zero_set(disc: Spectrum) -> None:
    largest = np.abs(disc.modes.vectors).max(axis=0)
    checked = 0
    for index, partial in enumerate(disc.partials):
        for line in partial.nodal.lines:
            inside = line[:, np.hypot(*line) < 1.0 - 1e-9][:, ::5]
            values = disc.modes.at(inside)[index]
            assert np.abs(values).max() < 1e-11 * largest[index]
            checked += inside.shape[1]
    assert checked > 500


def test_lines_are_closed_or_end_on_the_rim(disc: Spectrum) -> None:
    ends = 0
    for partial in disc.partials:
        for line in partial.nodal.lines:
            if not np.array_equal(line[:, 0], line[:, -1]):
                np.testing.assert_allclose(np.hypot(*line[:, [0, -1]]), 1.0, atol=1e-6)
                ends += 2
    # each diameter has two ends, however lines that cross are joined
    assert ends == sum(2 * p.nodal.diameters for p in disc.partials)


def test_the_first_circle_is_round_and_of_the_right_size(disc: Spectrum) -> None:
    (pattern,) = [p.nodal for p in disc.partials if p.number == 6]
    (line,) = pattern.lines
    j = jn_zeros(0, 2)
    np.testing.assert_allclose(np.hypot(*line), j[0] / j[1], rtol=1e-6)
    assert abs(pattern.length / (2 * np.pi * j[0] / j[1]) - 1.0) < 1e-6


def test_a_free_disc_starts_with_a_rigid_mode_and_its_rim_is_no_circle() -> None:
    # scipy's zeros of J_m', DLMF 10.21; the rim of a free disc is no nodal circle
    free = solved({**zoo.DISC, "edges": {"rim": {"support": "free"}}}, 12)
    rigid, *others = (p.nodal for p in free.partials)
    assert (rigid.domains, rigid.lines, rigid.length) == (1, (), 0.0)
    assert (rigid.diameters, rigid.circles) == (0, 0)

    def zeros(m: int):
        return enumerate(jnp_zeros(m, 10), int(m == 0))

    assert [(p.diameters, p.circles) for p in others] == sorted_labels(zeros, len(others))


def test_an_elastic_rim_counts_as_held() -> None:
    elastic = {**zoo.DISC, "edges": {"rim": {"support": "elastic", "stiffness": 2.0}}}
    labels = [(p.nodal.diameters, p.nodal.circles) for p in solved(elastic, 4).partials]
    assert labels[:3] == [(0, 1), (1, 1), (1, 1)]


@pytest.mark.parametrize("support", ["fixed", "free"])
def test_the_edge_of_a_hole_in_the_middle_is_no_circle(support: str) -> None:
    hole = {"name": "port", "shape": "disc", "diameter": 0.8, "support": support}
    labels = [
        (p.nodal.diameters, p.nodal.circles)
        for p in solved({**zoo.DISC, "holes": [hole]}, 5).partials
    ]
    assert labels[:5] == [(0, 1), (1, 1), (1, 1), (2, 1), (2, 1)]


def test_only_round_heads_are_named() -> None:
    hole = {"name": "port", "shape": "disc", "diameter": 0.2, "at": [0.4, 0.0]}
    for keys in (zoo.SQUARE, {**zoo.DISC, "holes": [hole]}):
        patterns = [p.nodal for p in solved(keys, 3).partials]
        assert [(p.diameters, p.circles) for p in patterns] == [(None, None)] * len(patterns)


def test_a_mode_of_mixed_orders_has_no_name() -> None:
    mesh = zoo.prepared(zoo.DISC).mesh
    mixed = modes_of(mesh, 6, [lambda x, y: x + 3 * x * y, lambda x, y: 2 * x * y])
    patterns = nodal_patterns(mixed, FREE)
    assert [(p.diameters, p.circles) for p in patterns] == [(None, None), (2, 0)]


@pytest.mark.parametrize("shape", [zoo.L_SHAPE, SECTOR])
def test_corners_shed_no_specks(shape: dict) -> None:
    lengths = [length(line) for p in solved(shape, 20).partials for line in p.nodal.lines]
    assert min(lengths) > 0.1
    assert len(lengths) > 40


def test_all_orders_but_the_first_count_twice() -> None:
    # int 7^2 r^2 cos^2 = 12.25 pi against int 1 = pi: 0.925 of the energy is of order 1
    mesh = zoo.prepared(zoo.DISC).mesh
    (pattern,) = nodal_patterns(modes_of(mesh, 4, [lambda x, y: 1 + 7 * x]), FREE)
    assert (pattern.diameters, pattern.circles) == (1, 0)


def test_a_square_against_sines() -> None:
    mesh = zoo.prepared(zoo.SQUARE, phase=1.5).mesh
    k, n = 2, 3
    wave = modes_of(
        mesh,
        8,
        [lambda x, y: np.sin(np.pi * x) * np.sin(np.pi * y)] * 6
        + [lambda x, y: np.sin(k * np.pi * x) * np.sin(n * np.pi * y)],
        fixed=tuple(mesh.edges),
    )
    first, last = nodal_patterns(wave, {})[:: len(wave.eigenvalues) - 1]
    assert (first.domains, first.lines, first.length) == (1, (), 0.0)
    assert last.domains == k * n
    assert abs(last.length - (k - 1 + n - 1)) < 5e-3


@pytest.mark.parametrize("keys", [zoo.DISC, zoo.SQUARE, zoo.L_SHAPE, zoo.PATCHED])
def test_courant(keys: dict) -> None:
    # R. Courant, 1923: the n-th mode has at most n nodal domains
    partials = solved(keys, 12).partials
    firsts = {p.cluster: p.number for p in reversed(partials)}
    assert len(partials) >= 12
    assert partials[0].nodal.domains == 1
    for partial in partials[1:]:
        assert 2 <= partial.nodal.domains <= firsts[partial.cluster]


def test_the_length_of_a_circle_of_sixty_points() -> None:
    angle = np.linspace(0.0, 2.0 * np.pi, 61)
    circle = np.array([np.cos(angle), np.sin(angle)])
    circle[:, -1] = circle[:, 0]
    assert abs(length(circle) / (2.0 * np.pi) - 1.0) < 1e-6
    assert abs(length(circle[:, :16]) / (0.5 * np.pi) - 1.0) < 1e-6
    assert length(np.array([[0.0, 3.0], [0.0, 4.0]])) == 5.0
