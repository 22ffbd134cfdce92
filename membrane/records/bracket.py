"""The bracket: an interval for every eigenvalue, and what it is worth."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.records.arrays import Floats

GUARANTEED, ESTIMATED = "guaranteed", "estimated"


@dataclass(frozen=True)
class Bracket:
    """Eigenvalues (rad/s)^2 between ``low`` (n,) and ``high`` (n,); a rigid mode's are 0.

    label : "guaranteed" (proven, up to rounding) or "estimated"
    reason : why it is not guaranteed, as the end of a sentence; "" where it is
    """

    low: Floats
    high: Floats
    label: str
    reason: str = ""

    @property
    def widest(self) -> float:
        """Cents from low to high of the mode known least."""
        return float(self.cents.max())

    @property
    def cents(self) -> Floats:
        """(n,), from low to high; 0 for a rigid mode, infinite where low alone is 0."""
        ratio = np.ones_like(self.high)
        moving = self.high > 0.0
        with np.errstate(divide="ignore"):
            ratio[moving] = self.high[moving] / self.low[moving]
        return np.asarray(CENTS_PER_EIGENVALUE * np.log(ratio))

    def holding(self, eigenvalues: Floats) -> Bracket:
        """The bracket, widened where a better mesh's rounding puts a value (n,) just outside."""
        low, high = np.minimum(self.low, eigenvalues), np.maximum(self.high, eigenvalues)
        return replace(self, low=low, high=high)
