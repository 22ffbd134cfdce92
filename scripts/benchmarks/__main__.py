"""Runs the sections one after another; one that fails does not stop the others."""

from __future__ import annotations

import argparse
import subprocess
import sys

SECTIONS = ("accuracy", "assembly", "eigen", "growth", "sweep", "whole")


def main() -> None:
    """Exit code 1 where a section failed."""
    options = _options()
    failed = [name for name in options.sections or SECTIONS if not _run(name, options.quick)]
    if failed:
        sys.exit(f"These sections failed: {', '.join(failed)}; their errors are printed above.")


def _options() -> argparse.Namespace:
    parser = argparse.ArgumentParser(prog="scripts/bench", description=__doc__)
    parser.add_argument("sections", nargs="*", choices=[[], *SECTIONS], help="all if left out")
    parser.add_argument("--quick", action="store_true", help="small cases only; nothing is kept")
    return parser.parse_args()


def _run(section: str, quick: bool) -> bool:
    command = [sys.executable, "-m", "scripts.benchmarks.section", section]
    return subprocess.run([*command, *(["--quick"] if quick else [])]).returncode == 0


if __name__ == "__main__":
    main()
