"""Whether a formula is smooth at the origin, where r and theta are not."""

from __future__ import annotations

import ast

from membrane.varying.formula import PLACES, Formula

KINKED = frozenset(("sqrt", "abs", "sign", "atan2", "hypot", "min", "max", "where", "log"))
"""Functions that may have a kink, or no value, somewhere."""


def is_smooth_at_origin(formula: Formula) -> bool:
    """False where r, theta or a kinked function may leave a kink at the origin.

    Only even powers of r are smooth there: r**2 is x**2 + y**2. A formula that is smooth
    in some less plain way, such as r*r**3, counts as kinked, which does no harm.
    """
    return _is_smooth(formula.tree)


def _is_smooth(node: ast.expr) -> bool:
    match node:
        case ast.Name(id=name):
            return name not in ("r", "theta")
        case ast.BinOp(left=base, op=ast.Pow(), right=ast.Constant(value=int(power))):
            return (power % 2 == 0 and _is_r(base)) or _is_smooth(base)
        case ast.BinOp(left=one, op=ast.Mult(), right=other) if _is_r(one) and _is_r(other):
            return True
        case ast.BinOp(op=ast.Pow() | ast.Div(), right=divisor) if not _is_constant(divisor):
            return False
        case ast.BinOp(op=ast.Pow()) | ast.Compare():
            return _is_constant(node)
        case ast.Call(func=ast.Name(id=name)) if name in KINKED:
            return _is_constant(node)
        case ast.Call(args=parts):
            return all(map(_is_smooth, parts))
    return all(_is_smooth(p) for p in ast.iter_child_nodes(node) if isinstance(p, ast.expr))


def _is_constant(node: ast.expr) -> bool:
    return not any(isinstance(part, ast.Name) and part.id in PLACES for part in ast.walk(node))


def _is_r(node: ast.expr) -> bool:
    return isinstance(node, ast.Name) and node.id == "r"
