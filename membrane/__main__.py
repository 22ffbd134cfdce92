"""``python -m membrane`` does what ``membrane`` does."""

from membrane.cli import main

main()
