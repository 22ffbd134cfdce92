"""The exact values that the measurements are held to."""

import json

import numpy as np
import pytest

from scripts.benchmarks.heads import SPECTRA, disc, heavy_centre

KNOWN = json.loads(SPECTRA.read_text())["cases"]


@pytest.mark.parametrize(
    ("head", "case"), [(disc, "disc_fixed"), (heavy_centre, "composite_patch_0p4_9p765625")]
)
def test_round_heads(head, case):
    """30 values of the reference file, which names its sources."""
    known = np.array(KNOWN[case]["values"], dtype=float)
    np.testing.assert_allclose(head().exact[: len(known)], known, rtol=1e-13)


@pytest.mark.parametrize("head", [disc, heavy_centre])
def test_sixty_modes_by_weyls_law(head):
    """Below k lie about A k^2/(4 pi) - L k/(4 pi) modes, A in travel time: H. Weyl 1911, second
    term V. Ivrii 1980 (from memory). A branch left out would shift the mean by about two."""
    exact = head().exact
    assert len(exact) == 60
    heavy = np.pi * 0.4**2 * (9.765625 - 1.0) if head is heavy_centre else 0.0
    k = np.sqrt(exact)
    law = ((np.pi + heavy) * k**2 - 2 * np.pi * k) / (4 * np.pi)
    assert abs(np.mean(law - np.arange(60))) < 0.75
