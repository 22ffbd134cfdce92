"""Samples spread evenly over regions and along edges."""

from __future__ import annotations

import numpy as np

from tests import zoo

KEYS = {
    **zoo.PATCHED,
    "head": {"areal_density": {"formula": "1 + x**2"}, "tension": 1.0},
    "holes": [{"name": "port", "shape": "disc", "diameter": 0.2, "at": [0.6, 0.0]}],
}


def test_they_lie_in_their_regions_and_on_their_edges():
    with zoo.drawn(KEYS) as (_, _, outline, _):
        samples = outline.samples
    assert set(samples) == {"head", "paste", "rim", "port"}
    x, y = samples["paste"].points
    assert np.hypot(x, y).max() < 0.4
    assert np.abs(np.hypot(*samples["rim"].points) - 1.0).max() < 1e-12
    x, y = samples["port"].points
    assert np.abs(np.hypot(x - 0.6, y) - 0.1).max() < 1e-12


def test_their_weights_integrate():
    """The mean of x^2 over a disc of radius a is a^2/4, along its rim a^2/2."""
    with zoo.drawn(KEYS) as (_, _, outline, _):
        paste, rim = outline.samples["paste"], outline.samples["rim"]
    assert abs(paste.weights @ paste.points[0] ** 2 - 0.04) < 0.002
    assert abs(rim.weights @ rim.points[0] ** 2 - 0.5) < 1e-6


def test_a_head_without_varying_coefficients_has_none():
    with zoo.drawn(zoo.PATCHED) as (_, _, outline, _):
        assert outline.samples == {}
