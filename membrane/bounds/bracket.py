"""The bracket of each mode: upper bounds, the count, lower bounds, and the margins."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np

from membrane.bounds.fluxes import best_fluxes
from membrane.bounds.gap import proven_limit, widest_gap
from membrane.bounds.geometry import above, below
from membrane.bounds.goerisch import flux_form, lower_bounds
from membrane.bounds.head import Head, head_of
from membrane.bounds.local_fluxes import Sources
from membrane.bounds.pieces import pieces
from membrane.bounds.provable import check_provable
from membrane.bounds.rims import Rim, rims
from membrane.bounds.ritz import Forms, forms
from membrane.errors import BracketError, SolveError
from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.records.arrays import Floats
from membrane.records.bracket import GUARANTEED, Bracket
from membrane.records.membrane import Membrane
from membrane.records.modes import Modes

ROUNDING = 1e-8
"""Cents by which each bound is moved outwards for rounding, which is not in the proofs."""

SHIFT = 0.1
"""gamma as a share of the limit nu."""

FLUX_DEGREES = (-1, 0, 1)
"""Degrees of the fluxes tried in turn, from that of the modes up."""

HIGH = 6
"""Degree of the modes from which fluxes of one less are worth a try."""

HOPELESS = 0.5
"""Share of the width that a degree must leave for the next one to be worth its while."""


def bracketed(membrane: Membrane, modes: Modes, count: int, accuracy: float) -> Bracket:
    """A guaranteed bracket of the ``count`` lowest modes.

    modes : more of them than that, so that a gap is found after which the count is proven
    accuracy : cents, from low to high; the work stops where it is reached
    Raises BracketError, whose sentence says why none is guaranteed.
    """
    check_provable(membrane)
    head = head_of(membrane, modes.space.mesh)
    kept = widest_gap(modes.eigenvalues, count)
    try:
        return _Bounds(head, modes, kept).bracket(count, accuracy, membrane.moves_rigidly)
    except (SolveError, np.linalg.LinAlgError) as failure:
        raise BracketError("rounding spoils the lower bounds on this mesh") from failure


class _Bounds:
    """The bounds on the ``kept`` lowest modes of a head."""

    def __init__(self, head: Head, modes: Modes, kept: int) -> None:
        self.head, self.space = below(head), modes.space
        self.vectors = modes.vectors[:, :kept]
        degree = 2 * (self.space.degree + max(FLUX_DEGREES))
        self.pieces, self.rims = pieces(head, degree), list(rims(self.head, degree))
        doubts = [*(piece.doubt for piece in self.pieces), *(rim.doubt for rim in self.rims)]
        if not np.isfinite(np.concatenate(doubts)).all():
            raise BracketError("the mesh's triangles are bent too much")
        self.forms = self._forms(self.head, self.rims)
        self.high = self._forms(above(head), rims(above(head), degree)).values
        following = float(modes.eigenvalues[kept])
        self.limit = proven_limit(self.head, float(self.high[-1]), following, kept)

    def bracket(self, count: int, accuracy: float, rigid: bool) -> Bracket:
        margin = ROUNDING / CENTS_PER_EIGENVALUE
        high = self.high[:count] * (1 + margin)
        best = Bracket(np.zeros(count), high, GUARANTEED)
        for more in FLUX_DEGREES[self.space.degree < HIGH :]:
            low = self._low(self.space.degree + more)[:count] * (1 - margin)
            if rigid:
                low[0] = high[0] = 0.0
            before, best = best.widest, Bracket(np.maximum(best.low, low), high, GUARANTEED)
            if best.widest <= accuracy or best.widest > HOPELESS * before:
                break
        if not np.isfinite(best.widest):
            raise BracketError("the lower bounds do not close")
        return best

    def _forms(self, head: Head, along: Iterable[Rim]) -> Forms:
        return forms(head, self.space, self.vectors, self.pieces, along)

    def _low(self, degree: int) -> Floats:
        gamma = SHIFT * self.limit
        sources = Sources(self.space, self.vectors, self.high, gamma)
        fluxes = best_fluxes(self.head, sources, degree)
        c = flux_form(self.head, self.space, self.vectors, fluxes, gamma, self.pieces, self.rims)
        return lower_bounds(self.forms, c, self.limit, gamma)
