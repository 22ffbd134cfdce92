"""Every contestant finds the modes of every head."""

import numpy as np
import pytest

from membrane.mesh import Resolution
from scripts.benchmarks import ours, plain
from scripts.benchmarks.heads import HEADS, disc


def error(head, values, count=8):
    assert len(values) == count
    return np.abs(values / HEADS[head]().exact[:count] - 1).max()


@pytest.mark.parametrize("head", HEADS)
def test_ours(head):
    found = ours.solve(HEADS[head]().keys, 8, Resolution(5, 3.0, 1e-6))
    assert error(head, found) < 2e-5


def test_what_run_chooses():
    assert error("disc", ours.run(disc().keys, 8, 1.0)) < 1e-4


@pytest.mark.parametrize(
    ("head", "settings", "expected"),
    [
        ("disc", plain.Settings(4, 3, 2), 1e-5),
        ("disc", plain.Settings(2, 4, 1), 5e-3),
        ("L-shape", plain.Settings(4, 3), 1e-3),
        ("heavy centre", plain.Settings(2, 4, 2), 1e-3),
    ],
)
def test_plain_script(head, settings, expected):
    assert error(head, plain.solve(head, 8, settings)) < expected


@pytest.mark.parametrize(("head", "layers"), [("disc", 0), ("L-shape", 4), ("heavy centre", 0)])
def test_hp_library(head, layers):
    pytest.importorskip("ngsolve")
    from scripts.benchmarks import hp_library

    found = hp_library.solve(head, 8, hp_library.Settings(6, 0.4, layers))
    assert error(head, found) < 1e-6
