"""The command line; it holds no computation, and each command loads what it needs."""

import os


def main() -> None:
    """The console script ``membrane``."""
    # One head's matrices are too small to gain from threads: a second one costs time.
    for library in ("OPENBLAS", "OMP", "MKL"):
        os.environ.setdefault(f"{library}_NUM_THREADS", "1")
    from membrane.cli.app import app

    app(prog_name="membrane")
