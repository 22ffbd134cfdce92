"""Samples spread evenly over regions and along edges."""

from __future__ import annotations

import numpy as np

from tests import zoo

KEYS = {
    **zoo.PATCHED,
    "head": {"areal_density": {"formula": "1 + x**2"}, "tension": 1.0},
    "holes": [{"name": "port", "shape": "disc", "diameter": 0.2, "at": [0.6, 0.0]}],
    "line_loads": [
        {"name": "wire", "shape": "polyline", "points": [[-0.5, 0.5], [0.5, 0.5]]}
        | {"line_density": 0.1}
    ],
}


def test_they_lie_in_their_regions_and_on_their_edges():
    with zoo.drawn(KEYS) as (_, _, outline, _):
        samples = outline.samples
    assert set(samples) == {"head", "paste", "rim", "port", "wire"}
    x, y = samples["paste"].points
    assert np.hypot(x, y).max() < 0.4
    assert np.abs(np.hypot(*samples["rim"].points) - 1.0).max() < 1e-12
    x, y = samples["port"].points
    assert np.abs(np.hypot(x - 0.6, y) - 0.1).max() < 1e-12
    x, y = samples["wire"].points
    assert np.abs(y - 0.5).max() < 1e-12
    assert 0.4 < np.abs(x).max() < 0.5


def test_their_weights_integrate():
    """The mean of x^2 over a disc of radius a is a^2/4, along its rim a^2/2,
    over -1/2 < x < 1/2 it is 1/12."""
    with zoo.drawn(KEYS) as (_, _, outline, _):
        paste, rim, wire = (outline.samples[name] for name in ("paste", "rim", "wire"))
    assert abs(paste.weights @ paste.points[0] ** 2 - 0.04) < 0.002
    assert abs(rim.weights @ rim.points[0] ** 2 - 0.5) < 1e-6
    assert abs(wire.weights @ wire.points[0] ** 2 - 1 / 12) < 1e-3


def test_a_head_without_varying_coefficients_has_none():
    with zoo.drawn(zoo.PATCHED) as (_, _, outline, _):
        assert outline.samples == {}
