"""The command ``plugins``: what there is, where it comes from, and what it does."""

from __future__ import annotations

from rich.console import Console
from rich.table import Table

from membrane import plugins

_UNBROKEN = 1000
"""Columns where nobody looks: a row then stays one line, for grep."""


def print_plugins() -> None:
    """Print all plugins; none of them is imported. Raises PluginError for a clash."""
    table = Table("kind", "name", "package", "what it is", box=None, pad_edge=False)
    for kind in plugins.GROUPS:
        for name, plugin in plugins.registered(kind).items():
            table.add_row(kind, name, plugin.package, plugins.describe(kind, name))
    terminal = Console()
    console = terminal if terminal.is_terminal else Console(width=_UNBROKEN)
    console.print(table)
