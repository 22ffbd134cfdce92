"""The commands, their arguments and their help."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated, Any

import typer
from typer.core import TyperGroup

import membrane
from membrane.cli.failures import failures_told


class _Group(TyperGroup):
    """The commands, with ``--traceback`` allowed anywhere on the line."""

    def parse_args(self, ctx: Any, args: list[str]) -> list[str]:
        return super().parse_args(ctx, sorted(args, key=lambda word: word != "--traceback"))


app = typer.Typer(
    cls=_Group,
    name="membrane",
    help="Find the modes of drum heads and other tensioned membranes.",
    no_args_is_help=True,
    add_completion=False,
    pretty_exceptions_enable=False,
)

StudyFile = Annotated[Path, typer.Argument(metavar="STUDY", help="Study file (TOML).")]


def _print_version(wanted: bool) -> None:
    if wanted:
        typer.echo(f"membrane {membrane.__version__}")
        raise typer.Exit


@app.callback()
def _options(
    version: Annotated[
        bool, typer.Option("--version", help="Print the version.", callback=_print_version)
    ] = False,
    traceback: Annotated[
        bool, typer.Option("--traceback", help="Show where in the program an error arose.")
    ] = False,
) -> None:
    pass


@app.command()
def run(
    ctx: typer.Context,
    study: StudyFile,
    out: Annotated[Path, typer.Option(metavar="DIR", help="Folder for the result.")],
    json: Annotated[bool, typer.Option("--json", help="Print summary.json.")] = False,
    quiet: Annotated[bool, typer.Option("--quiet", help="Print nothing but errors.")] = False,
) -> None:
    """Solve a study and write its result."""
    from membrane.cli.run import run_study

    with failures_told(ctx, study):
        run_study(study, out, as_json=json, quiet=quiet)


@app.command()
def check(ctx: typer.Context, study: StudyFile) -> None:
    """Check a study and say what would be solved."""
    from membrane.cli.check import describe_study

    with failures_told(ctx, study):
        typer.echo(describe_study(study))


@app.command()
def sweep(
    ctx: typer.Context,
    study: StudyFile,
    out: Annotated[Path, typer.Option(metavar="DIR", help="Folder for the store and tables.")],
    workers: Annotated[
        int | None, typer.Option(help="Processes of this machine; all its cores if not given.")
    ] = None,
    scheduler: Annotated[
        str | None, typer.Option(metavar="ADDRESS", help="Use a running Dask scheduler.")
    ] = None,
    part: Annotated[
        str | None, typer.Option(metavar="N/M", help="Work on one of M parts of the points.")
    ] = None,
    merge: Annotated[
        bool, typer.Option("--merge", help="Bring the parts in DIR together.")
    ] = False,
    retry: Annotated[bool, typer.Option("--retry", help="Try failed points again.")] = False,
    parquet: Annotated[bool, typer.Option("--parquet", help="Write points.parquet too.")] = False,
    branches: Annotated[
        bool, typer.Option("--branches/--no-branches", help="Follow modes from point to point.")
    ] = True,
    quiet: Annotated[bool, typer.Option("--quiet", help="Print nothing but errors.")] = False,
) -> None:
    """Solve every point of a study's sweep; go on where it was stopped."""
    from membrane.cli.sweep import Wanted, run_sweep

    with failures_told(ctx, study):
        run_sweep(
            study, Wanted(out, workers, scheduler, part, merge, retry, parquet, branches, quiet)
        )


@app.command()
def plugins(ctx: typer.Context) -> None:
    """List the outlines, terms, eigensolvers and products there are."""
    from membrane.cli.plugins import print_plugins

    with failures_told(ctx):
        print_plugins()
