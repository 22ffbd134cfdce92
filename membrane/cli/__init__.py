"""The command line; it holds no computation, and each command loads what it needs."""


def main() -> None:
    """The console script ``membrane``."""
    from membrane.cli.app import app

    app(prog_name="membrane")
