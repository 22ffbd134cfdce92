"""Spectra that the tests of the products share."""

from __future__ import annotations

import pytest

from membrane import pipeline
from membrane.records.spectrum import Spectrum
from membrane.study import study_from
from tests import zoo


@pytest.fixture(scope="session")
def patched() -> Spectrum:
    """A round head with a heavy centre, seven modes, ratios to mode 2."""
    modes = {"count": 7, "ratio_to": 2}
    return pipeline.run(study_from({**zoo.PATCHED, "title": "Heavy centre", "modes": modes}))


@pytest.fixture(scope="session")
def free() -> Spectrum:
    """A free square, which moves rigidly at 0 Hz."""
    edges = {name: {"support": "free"} for name in ("left", "right", "bottom", "top")}
    keys = {**zoo.SQUARE, "title": "Free square", "edges": edges, "modes": {"count": 4}}
    return pipeline.run(study_from(keys))
