"""The stage from modes to their guaranteed brackets."""

from membrane.bounds.bracket import bracketed
from membrane.bounds.gap import SPARE
from membrane.bounds.provable import check_provable

__all__ = ["SPARE", "bracketed", "check_provable"]
