"""The columns that summary.json and modes.csv share."""

from __future__ import annotations

from typing import Any

from membrane.records.spectrum import Partial


def row(partial: Partial) -> dict[str, Any]:
    """One mode by column name; None where a column has nothing to say."""
    return {
        "number": partial.number,
        "frequency_hz": partial.frequency,
        "low_hz": partial.low,
        "high_hz": partial.high,
        "bracket": partial.bracket,
        "bracket_cents": partial.bracket_cents,
        "ratio": partial.ratio,
        "note": partial.note,
        "note_cents": partial.note_cents,
        "cluster": partial.cluster,
        "nodal_diameters": partial.nodal.diameters,
        "nodal_circles": partial.nodal.circles,
        "nodal_domains": partial.nodal.domains,
        "nodal_length_m": partial.nodal.length,
    }
