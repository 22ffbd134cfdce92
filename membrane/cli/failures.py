"""From an error to its sentences on stderr and the exit code."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

import typer

from membrane.errors import MembraneError, OutputError, StudyError

INTERRUPTED = 130
"""What shells expect of a program stopped by Ctrl-C."""


@contextmanager
def failures_told(ctx: typer.Context, study: Path | None = None) -> Iterator[None]:
    """Turn errors into sentences, unless ``--traceback`` is given.

    study : the file that the errors are about
    """
    try:
        yield
    except KeyboardInterrupt:
        typer.echo("Stopped; nothing was written.", err=True)
        raise typer.Exit(INTERRUPTED) from None
    except (typer.Exit, BrokenPipeError):  # a reader such as head may close the pipe
        raise
    except Exception as error:  # the one place where any error at all becomes a sentence
        if ctx.find_root().params["traceback"]:
            raise
        for line in _sentences(error, study):
            typer.echo(line, err=True)
        raise typer.Exit(error.exit_code if isinstance(error, MembraneError) else 1) from None


def _sentences(error: Exception, study: Path | None) -> list[str]:
    if not isinstance(error, MembraneError):
        name = type(error).__name__
        return [f"membrane: internal error ({name}: {error}); --traceback shows where it arose."]
    told = error.problems if isinstance(error, StudyError) else (error,)
    prefix = "" if study is None or isinstance(error, OutputError) else f"{study}: "
    return [f"{prefix}{sentence}" for sentence in told]
