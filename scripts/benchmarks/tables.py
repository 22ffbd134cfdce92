"""Rows of measurements as text."""

from __future__ import annotations

from collections.abc import Sequence

Row = dict[str, str | int | float]


def table_text(rows: Sequence[Row]) -> str:
    """A Markdown table; the columns are the rows' keys, in the order they first come."""
    columns = list(dict.fromkeys(key for row in rows for key in row))
    cells = [columns, *([_cell(row.get(key, "")) for key in columns] for row in rows)]
    widths = [max(map(len, column)) for column in zip(*cells, strict=True)]
    head, *body = (
        "| "
        + " | ".join(cell.rjust(width) for cell, width in zip(line, widths, strict=True))
        + " |"
        for line in cells
    )
    rule = "|" + "|".join("-" * (width + 1) + ":" for width in widths) + "|"
    return "\n".join([head, rule, *body])


def _cell(value: str | int | float) -> str:
    return f"{value:.3g}" if isinstance(value, float) else str(value)
