"""The command ``plugins``: what there is, where it comes from, and what it does."""

from __future__ import annotations

from rich.console import Console
from rich.table import Table

from membrane import plugins


def print_plugins() -> None:
    """Print all plugins; none of them is imported. Raises PluginError for a clash."""
    table = Table("kind", "name", "package", "what it is", box=None, pad_edge=False)
    for kind in plugins.GROUPS:
        for name, plugin in plugins.registered(kind).items():
            table.add_row(kind, name, plugin.package, plugins.describe(kind, name))
    Console(soft_wrap=not Console().is_terminal).print(table)
