"""Runs one section in a process of its own, prints its tables and keeps them."""

from __future__ import annotations

import sys
from importlib import import_module

from threadpoolctl import threadpool_limits

from scripts.benchmarks import results
from scripts.benchmarks.tables import table_text


def main() -> None:
    name, quick = sys.argv[1], "--quick" in sys.argv[2:]
    measure = import_module(f"scripts.benchmarks.{name}").measure
    with threadpool_limits(limits=1):
        tables = measure(quick)
    for title, rows in tables.items():
        print(f"\n{title}\n\n{table_text(rows)}", flush=True)
    if not quick:
        results.keep(name, tables)


if __name__ == "__main__":
    main()
