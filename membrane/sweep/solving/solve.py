"""One full solve of a study on a mesh of its outline, with what is known of its errors."""

from __future__ import annotations

import numpy as np

from membrane import plugins
from membrane.accuracy import estimate
from membrane.bounds import bracketed, check_provable
from membrane.coefficients import coefficients
from membrane.errors import BracketError
from membrane.modes import coarser_modes
from membrane.pencil import assemble, rescaled
from membrane.pipeline import modes_of
from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.records.arrays import Floats
from membrane.records.bracket import Bracket
from membrane.records.membrane import Membrane
from membrane.records.modes import Modes
from membrane.records.pencil import Pencil
from membrane.records.study import Study
from membrane.sweep.solving.rungs import Rung


def solved(study: Study, rung: Rung, guaranteed: bool) -> tuple[Modes, Bracket]:
    """The modes of a study, bracketed as well as is wanted and can be.

    Raises SolveError where the count of modes does not close.
    """
    wanted, membrane = study.modes, coefficients(study, rung.outline)
    fine = pencil_of(membrane, rung, rung.fine)
    solver = plugins.load("eigensolver", wanted.eigensolver).solve
    more, modes = modes_of(fine, wanted, solver, guaranteed)
    reason = ""
    if guaranteed:
        try:
            check_provable(membrane)
            found = bracketed(membrane, more, len(modes.eigenvalues), wanted.accuracy)
            return modes, found.holding(modes.eigenvalues)
        except BracketError as why:
            reason = str(why)
    coarse = pencil_of(membrane, rung, rung.coarse)
    return modes, estimate(modes, coarser_modes(coarse, modes), reason)


def pencil_of(membrane: Membrane, rung: Rung, own: Pencil) -> Pencil:
    """The pencil of a membrane from that of the study's own head, or else assembled."""
    found = rescaled(own, rung.membrane, membrane)
    return found or assemble(membrane, rung.mesh, own.space.degree)


def errors(modes: Modes, bracket: Bracket) -> Floats:
    """(n,) cents, how far off each frequency may be, up or down."""
    cents = np.zeros(len(modes.eigenvalues))
    moving = modes.eigenvalues > 0.0
    found = modes.eigenvalues[moving]
    with np.errstate(divide="ignore"):
        apart = np.log([bracket.high[moving] / found, found / bracket.low[moving]])
    cents[moving] = CENTS_PER_EIGENVALUE * np.maximum(apart.max(axis=0), 0.0)
    return cents
