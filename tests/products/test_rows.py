"""A row has a value for every column of the schema."""

from __future__ import annotations

from membrane.products.rows import row
from membrane.records.spectrum import Spectrum


def test_values_stand_in_their_columns(patched: Spectrum) -> None:
    partial = patched.partials[5]
    found = row(partial)
    assert found["number"] == 6
    assert found["frequency_hz"] == partial.frequency
    assert (found["nodal_diameters"], found["nodal_circles"]) == (
        partial.nodal.diameters,
        partial.nodal.circles,
    )
    assert found["nodal_domains"] == partial.nodal.domains
    assert all(key == key.lower() for key in found)
