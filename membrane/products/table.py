"""table.txt: the partials as a table to read at the bench, 80 columns wide."""

from __future__ import annotations

from dataclasses import dataclass
from io import StringIO
from math import ceil
from pathlib import Path
from typing import TYPE_CHECKING

from membrane.products.caution import CAUTION, NOT_COVERED
from membrane.records.spectrum import Partial, Spectrum

if TYPE_CHECKING:
    from rich.table import Table

FILE = "table.txt"
WIDTH = 80
LEAST_SHOWN = 0.001
"""Cents; a thousandth of what an ear can tell."""
LOWEST_HEARD, HIGHEST_HEARD = 16.0, 20_000.0
"""Hz, common practice, no source."""
SAME_PITCH = {"first": "┐", "inner": "│", "last": "┘", "alone": ""}
BRACKETS = {
    "guaranteed": "± is guaranteed for the study as written.",
    "estimated": "± is an estimate from a second, coarser solve, not a proof.",
    "none": "No ± was asked for.",
}


@dataclass(frozen=True)
class Options:
    """None: the table always has the same columns."""


def write(spectrum: Spectrum, folder: Path, options: Options) -> None:
    """Write table.txt, which is also what a run prints."""
    (folder / FILE).write_text(table_text(spectrum), encoding="utf-8")


def table_text(spectrum: Spectrum) -> str:
    """The table with what stands above and below it, at most 80 columns wide."""
    from rich.console import Console

    console = Console(
        file=StringIO(), width=WIDTH, color_system=None, force_terminal=False, highlight=False
    )
    console.print(spectrum.study.title or "Untitled", markup=False)
    console.print(_table(spectrum))
    for sentence in _footer(spectrum):
        console.print(sentence, markup=False)
    text: str = console.file.getvalue()  # type: ignore[attr-defined]
    return "\n".join(line.rstrip() for line in text.splitlines()) + "\n"


def _table(spectrum: Spectrum) -> Table:
    from rich import box
    from rich.table import Table

    is_round = any(partial.nodal.diameters is not None for partial in spectrum.partials)
    table = Table(box=box.SIMPLE_HEAD, pad_edge=False, show_edge=False)
    headings = ["#", "(m,n)", "Hz", "", "± cents", "ratio", "note", "cents", "domains"]
    kept = [heading for heading in headings if is_round or heading != "(m,n)"]
    for heading in kept:
        left = heading in ("note", "")
        table.add_column(heading, justify="left" if left else "right", no_wrap=True)
    marks = _marks(spectrum.partials)
    for partial, mark in zip(spectrum.partials, marks, strict=True):
        cells = dict(zip(headings, _cells(partial, mark), strict=True))
        table.add_row(*(cells[heading] for heading in kept))
    return table


def _cells(partial: Partial, mark: str) -> list[str]:
    nodal = partial.nodal
    named = nodal.diameters is not None
    return [
        str(partial.number),
        f"({nodal.diameters},{nodal.circles})" if named else "–",
        f"{partial.frequency:.3f}",
        mark,
        _half_width(partial.bracket_cents),
        "–" if partial.ratio is None else f"{partial.ratio:.4f}",
        partial.note or "–",
        "–" if partial.note_cents is None else f"{partial.note_cents:+.1f}",
        str(nodal.domains),
    ]


def _half_width(bracket_cents: float | None) -> str:
    """Half the bracket in cents, rounded up so that it is never understated."""
    if bracket_cents is None:
        return "–"
    half = 0.5 * bracket_cents
    if half < LEAST_SHOWN:
        return f"<{LEAST_SHOWN}"
    decimals = 3 if half < 0.1 else 2
    return f"{ceil(half * 10**decimals) / 10**decimals:.{decimals}f}"


def _marks(partials: tuple[Partial, ...]) -> list[str]:
    """What joins the rows of one frequency."""
    clusters = [partial.cluster for partial in partials]
    before = [None, *clusters[:-1]]
    after = [*clusters[1:], None]
    kinds = {
        (False, False): "alone",
        (False, True): "first",
        (True, True): "inner",
        (True, False): "last",
    }
    return [
        SAME_PITCH[kinds[here == left, here == right]]
        for left, here, right in zip(before, clusters, after, strict=True)
    ]


def _footer(spectrum: Spectrum) -> list[str]:
    partials = spectrum.partials
    pitch = f"A4 = {spectrum.study.modes.reference_pitch:g} Hz."
    unison = next((p.number for p in partials if p.ratio == 1.0), None)
    reading = [pitch] if unison is None else [f"Ratios are to mode {unison}; {pitch}"]
    if any(_marks(partials)):
        reading.append("Modes joined by ┐ and ┘ share one frequency.")
    wanted = spectrum.study.modes
    if wanted.up_to is None and len(partials) > wanted.count:
        reading.append(f"More than {wanted.count}, since equal frequencies are never cut apart.")
    return [
        " ".join(reading),
        *_out_of_hearing(partials),
        " ".join([_completeness(spectrum), BRACKETS[partials[-1].bracket], *_shortfall(spectrum)]),
        *spectrum.notes,
        NOT_COVERED,
        CAUTION,
    ]


def _out_of_hearing(partials: tuple[Partial, ...]) -> list[str]:
    """A word where a forgotten "mm" or "k" may have moved everything out of hearing."""
    heard = any(LOWEST_HEARD <= partial.frequency <= HIGHEST_HEARD for partial in partials)
    return [] if heard else ["No partial lies within hearing: are the study's units as meant?"]


def _completeness(spectrum: Spectrum) -> str:
    if spectrum.complete:
        return "Complete: a count shows that the solver missed no mode below the last."
    return "Not shown to be complete: the count did not close, so a mode may be missing."


def _shortfall(spectrum: Spectrum) -> list[str]:
    met = spectrum.mesh_facts.get("accuracy_met", True)
    return [] if met else ["The accuracy asked for was not reached on the finest mesh tried."]
