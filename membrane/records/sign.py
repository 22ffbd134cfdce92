"""Which numbers a quantity may have."""

from __future__ import annotations

from enum import Enum
from typing import Any


class Sign(Enum):
    """Which numbers a quantity may have."""

    ANY = "any"
    NOT_NEGATIVE = "not negative"
    POSITIVE = "positive"

    def allows(self, number: Any) -> Any:
        """Whether a number, or each of an array, has this sign."""
        if self is Sign.POSITIVE:
            return number > 0.0
        return self is Sign.ANY or number >= 0.0

    def worded(self, noun: str) -> str:
        """ "a length" as "a positive length"."""
        if self is Sign.POSITIVE:
            return f"a positive {noun.split(' ', 1)[1]}"
        return noun if self is Sign.ANY else f"{noun} of zero or more"
