"""Tension by head and patch, each number under its own key."""

import numpy as np

from membrane.records.membrane import Field
from tests import zoo


def test_woven_head_and_plain_patch():
    head = {"areal_density": 1.0, "tension": {"along": 3.0, "across": 2.0, "angle": "30 deg"}}
    patch = {"name": "pad", "shape": "disc", "diameter": 0.5, "tension": 7.0}
    with zoo.drawn({**zoo.DISC, "head": head, "patches": [patch]}) as (_, _, _, membrane):
        keys = [c.key for c in membrane.contributions if c.field is Field.TENSION]
        woven, pad = (membrane.total(Field.TENSION, name) for name in ("head", "pad"))
    assert keys == ["head.tension.along", "head.tension.across", "patches.pad.tension"]
    np.testing.assert_allclose(np.linalg.eigvalsh(woven), [2.0, 3.0])
    np.testing.assert_allclose(woven @ [np.sqrt(3) / 2, 0.5], [3 * np.sqrt(3) / 2, 1.5])
    np.testing.assert_allclose(pad, 7.0 * np.eye(2))
