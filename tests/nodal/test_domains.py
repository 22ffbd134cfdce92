"""Domains that only touch are two, and a narrow neck still joins."""

from __future__ import annotations

import numpy as np
import pytest

from membrane.nodal.domains import count_domains
from membrane.nodal.edges import mesh_edges
from membrane.records.modes import Modes
from membrane.subdivision import subdivide
from tests import zoo
from tests.synthetic import modes_of


def counted(modes: Modes, parts: int = 8) -> list[int]:
    divided = subdivide(modes.space.mesh, parts)
    values = divided.values(modes.space, modes.vectors)
    edges = mesh_edges(modes.space, modes.vectors, divided, values)
    return count_domains(modes, values, edges).tolist()


@pytest.mark.parametrize("turn", [0.0, 0.1, 0.777])
@pytest.mark.parametrize("order", [2, 3, 4])
def test_sectors_that_meet_in_the_middle(order: int, turn: float) -> None:
    def petals(x, y):
        return np.real((x + 1j * y) ** order * np.exp(1j * turn))

    constant = [lambda x, y: np.ones_like(x)] * 10
    modes = modes_of(zoo.prepared(zoo.DISC).mesh, 6, [*constant, petals])
    assert counted(modes)[-1] == 2 * order


def test_a_slight_error_does_not_join_what_touches() -> None:
    functions = [lambda x, y: np.ones_like(x)] * 4
    functions += [lambda x, y: x * y + 1e-6, lambda x, y: x * y + 0.05]
    modes = modes_of(zoo.prepared(zoo.DISC).mesh, 6, functions)
    assert counted(modes)[-2:] == [4, 3]


def test_courants_bound_rules_over_a_faint_neck() -> None:
    # two humps joined by a saddle of 1e-5 of their height: the first mode has one domain
    def humps(x, y):
        return x**2 + 1e-5

    modes = modes_of(zoo.prepared(zoo.DISC).mesh, 6, [humps, humps, humps])
    assert counted(modes) == [1, 2, 2]


def test_what_is_only_noise_is_no_domain() -> None:
    rng = np.random.default_rng(0)

    def one_side(x, y):
        return np.maximum(0.0, x - 0.2) + 1e-7 * rng.standard_normal(x.size)

    ones = [lambda x, y: np.ones_like(x)] * 9
    modes = modes_of(zoo.prepared(zoo.DISC).mesh, 1, [*ones, one_side])
    assert counted(modes, 4)[-1] == 1
