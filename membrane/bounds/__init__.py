"""The stage from modes to their guaranteed brackets."""

from membrane.bounds.bracket import bracketed
from membrane.bounds.gap import SPARE

__all__ = ["SPARE", "bracketed"]
