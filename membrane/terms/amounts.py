"""How an amount of the study, one number or a function of place, enters a contribution."""

from __future__ import annotations

from membrane.records.arrays import Floats
from membrane.records.function import Amount, Function
from membrane.records.membrane import Contribution, Field
from membrane.records.study import Study


def contribution(
    study: Study,
    key: str,
    field: Field,
    where: tuple[str, ...],
    amount: Amount,
    tensor: Floats | None = None,
) -> Contribution:
    """The contribution of one key: a number scales 1 or a tensor; a function is scaled by 1.

    tensor : (2, 2), dimensionless, that the amount multiplies
    A function's places count from the outline's own origin.
    """
    if isinstance(amount, Function):
        function = amount.moved(study.outline.at)
        value = function if tensor is None else function.times(tensor)
        return Contribution(key, field, where, 1.0, value)
    return Contribution(key, field, where, amount, 1.0 if tensor is None else tensor)


def is_there(amount: Amount) -> bool:
    """False for a number that is zero."""
    return isinstance(amount, Function) or amount > 0.0
