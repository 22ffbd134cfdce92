"""The command ``run``: a study solved and its result put in place."""

from __future__ import annotations

from pathlib import Path

import typer

from membrane.cli.progress import shown_progress
from membrane.results import SUMMARY, check_free, in_place
from membrane.study import read_study

TABLE = "table.txt"
"""What the product ``table`` writes; it is also what is printed."""


def run_study(file: Path, out: Path, as_json: bool, quiet: bool) -> None:
    """Read, solve, write and print. Raises MembraneError."""
    study = read_study(file)
    folder = check_free(out)
    from membrane import pipeline

    with shown_progress(quiet) as progress:
        spectrum = pipeline.run(study, progress)
        progress("products")
        with in_place(folder) as partial:
            pipeline.write(spectrum, partial)
    if as_json:
        typer.echo((folder / SUMMARY).read_text(encoding="utf-8"), nl=False)
    elif not quiet:
        _print_table(folder)
        typer.echo(f"The result is in {out}.")


def _print_table(folder: Path) -> None:
    table = folder / TABLE
    if table.is_file():
        typer.echo(table.read_text(encoding="utf-8"), nl=False)
