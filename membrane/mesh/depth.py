"""What a singular corner needs: the power of its fan, and how many layers around it."""

from __future__ import annotations

from collections.abc import Sequence
from math import ceil, log

from membrane.mesh.corner import Term

RATIO = 0.4
"""Size of each layer to the one around it."""

FAN_POWERS, NO_FANS = range(1, 5), range(1, 2)
"""Powers by which the triangles at a corner may be drawn in."""

DEEPEST = 40
"""Most layers at one corner."""

WHOLE = 1e-7
"""How near to a whole number an exponent is taken as whole."""

LOOSE = 1e-8
"""Relative error above which a single layer is enough around fans of every power."""

MISSED = 20.0
"""Bound on the energy that the triangles at a corner miss, in the units of ``_remaining``."""


def treatment(
    terms: tuple[Term, ...],
    share: float,
    tolerance: float,
    degree: int,
    powers: Sequence[int] = FAN_POWERS,
) -> tuple[int, int]:
    """Power of the fan, 1 for none, and layers, for a relative error of the eigenvalues.

    share : square of the longest side of the corner's triangles, as a share of the head's area

    Drawn in by a power m, a term r^a of the modes becomes s^(m a), smooth where m a is whole
    and the other terms are its whole powers. The power that needs the fewest layers is taken.
    """

    def layers(power: int) -> int:
        needed = max(_layers(term, power, share, tolerance, degree) for term in terms)
        return max(needed, _fewest(power, tolerance))

    power = min((m for m in powers if m <= degree), key=layers)
    return power, layers(power)


def _layers(term: Term, power: int, share: float, tolerance: float, degree: int) -> int:
    """Layers that leave a term ``tolerance``; the energy within r goes like r^(2 exponent)."""
    missed = _missed(term, power, share, degree)
    if missed <= tolerance:
        return 0
    return min(ceil(log(tolerance / missed) / (2 * term.exponent * log(RATIO))), DEEPEST)


def _missed(term: Term, power: int, share: float, degree: int) -> float:
    """Share of an eigenvalue that the triangles at a corner miss with no layer around them.

    Of a term s^e polynomials miss an energy that goes like degree^(-4 e): I. Babuska &
    M. Suri, RAIRO M2AN 21 (1987) 199 (from memory). Where e is near a whole number, s^e is
    that power but for a part in proportion to the difference; logarithms left no more in our
    trials than m^2/2 in its place, m the power, since r log r = m s^m log s.
    """
    e = power * term.exponent
    off = abs(e - max(round(e), 1)) if term.exact else 0.5 * power**2
    off = off if off > WHOLE else 0.0
    return float(MISSED * off**2 * min(share, 1.0) ** min(term.exponent, 1.0) * degree ** (-4 * e))


def _fewest(power: int, tolerance: float) -> int:
    """Layers that leave a fan smooth modes: drawn in, their waves become shorter."""
    return min(power - 1, 1 if tolerance > LOOSE else 2)
