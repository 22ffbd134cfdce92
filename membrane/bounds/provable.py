"""What the proofs cover, and why a membrane that they do not cover has estimates."""

from __future__ import annotations

from membrane.errors import BracketError
from membrane.records.function import Function
from membrane.records.membrane import Membrane


def check_provable(membrane: Membrane) -> None:
    """Raise BracketError where no bracket of a membrane can be guaranteed."""
    reason = unproven(membrane)
    if reason:
        raise BracketError(reason)


def unproven(membrane: Membrane) -> str:
    """Why no bracket of a membrane can be guaranteed, as the end of a sentence; or "" if it can."""
    if membrane.own_forms:
        return "a term brings a form of its own"
    for contribution in membrane.contributions:
        if isinstance(contribution.value, Function):
            return "a property varies from place to place"
    return ""
