"""Formulas in x, y, r and theta: parsed, checked against a short list, and evaluated.

A formula is never run as Python: its syntax tree is read, every part of it must be on the
lists below, and numpy works out the numbers.
"""

from __future__ import annotations

import ast
import warnings
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import reduce
from types import MappingProxyType
from typing import Any

import numpy as np

from membrane.records.arrays import Floats
from membrane.wording import listed, nearest, shown

PLACES = ("x", "y", "r", "theta")
CONSTANTS: Mapping[str, float] = MappingProxyType({"pi": np.pi})
LONGEST = 2000
DEEPEST = 200
"""Most characters, and most operations within each other."""

_OPERATORS: Mapping[type, Callable[..., Any]] = MappingProxyType(
    {
        ast.Add: np.add,
        ast.Sub: np.subtract,
        ast.Mult: np.multiply,
        ast.Div: np.divide,
        ast.Pow: np.power,
        ast.USub: np.negative,
        ast.UAdd: np.positive,
        ast.Lt: np.less,
        ast.LtE: np.less_equal,
        ast.Gt: np.greater,
        ast.GtE: np.greater_equal,
    }
)


def _least(*values: Any) -> Any:
    return reduce(np.minimum, values)


def _most(*values: Any) -> Any:
    return reduce(np.maximum, values)


def _where(condition: Any, one: Any, other: Any) -> Any:
    return np.where(np.asarray(condition) != 0.0, one, other)


FUNCTIONS: Mapping[str, tuple[Callable[..., Any], int | None]] = MappingProxyType(
    {
        **{name: (getattr(np, name), 1) for name in ("sqrt", "exp", "log", "abs", "sign")},
        **{name: (getattr(np, name), 1) for name in ("sin", "cos", "tan")},
        **{name: (getattr(np, f"arc{name[1:]}"), 1) for name in ("asin", "acos", "atan")},
        **{name: (getattr(np, name), 1) for name in ("sinh", "cosh", "tanh")},
        "atan2": (np.arctan2, 2),
        "hypot": (np.hypot, 2),
        "min": (_least, None),
        "max": (_most, None),
        "where": (_where, 3),
    }
)
"""Name -> the function and how many values it takes, None for two or more."""


@dataclass(frozen=True)
class Formula:
    """A formula whose every part has been checked."""

    text: str
    tree: ast.expr

    @classmethod
    def parsed(cls, text: str) -> Formula:
        """Raises ValueError with a sentence where the text is no formula."""
        if len(text) > LONGEST:
            raise ValueError(f"the formula is longer than {LONGEST} characters; shorten it.")
        tree = _parsed(text)
        _check(tree, 0)
        return cls(text, tree)

    def __call__(self, x: Floats, y: Floats) -> Floats:
        """Values (n,) at x (n,) and y (n,), metres; not finite where it has no value."""
        return self.at(x, y, 0.0)

    def at(self, x: Floats, y: Floats, turned: float) -> Floats:
        """The same with ``turned`` radians added to theta."""
        places = {"x": x, "y": y, "r": np.hypot(x, y), "theta": np.arctan2(y, x) + turned}
        with np.errstate(all="ignore"):
            values = _value(self.tree, {**CONSTANTS, **places})
        return np.array(np.broadcast_to(values, x.shape), dtype=float)


def _parsed(text: str) -> ast.expr:
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        try:
            return ast.parse(text.strip(), mode="eval").body
        except SyntaxError as failure:
            reason = f"{shown(text)} cannot be read ({failure.msg})"
            raise ValueError(f"the formula {reason}; repair it.") from None
        except (ValueError, RecursionError, MemoryError):
            raise ValueError(f"the formula {shown(text)} cannot be read; repair it.") from None


def _check(node: ast.AST, depth: int) -> None:
    """Raise ValueError for anything that is not on the lists."""
    if depth > DEEPEST:
        raise ValueError(f"the formula nests more than {DEEPEST} operations; split it up.")
    if isinstance(node, ast.Name):
        _check_name(node.id)
    elif isinstance(node, ast.Constant):
        _check_number(node.value)
    elif isinstance(node, ast.Call):
        _check_call(node)
    elif isinstance(node, ast.BinOp | ast.UnaryOp):
        _check_operator(node.op)
    elif isinstance(node, ast.Compare):
        for operator in node.ops:
            _check_operator(operator)
    else:
        raise ValueError(f"the formula may not hold {shown(ast.unparse(node))}.")
    for part in _parts(node):
        _check(part, depth + 1)


def _parts(node: ast.AST) -> list[ast.expr]:
    """The values that an operation or a function works on."""
    if isinstance(node, ast.Call):
        return node.args
    return [part for part in ast.iter_child_nodes(node) if isinstance(part, ast.expr)]


def _check_name(name: str) -> None:
    if name in FUNCTIONS:
        raise ValueError(f"in the formula {shown(name)} is a function; write {name}(…).")
    known = (*PLACES, *CONSTANTS)
    if name not in known:
        hint = nearest(name, (*known, *FUNCTIONS))
        named = hint if hint != "." else f"; known are {listed((*known, *FUNCTIONS))}."
        raise ValueError(f"the formula has an unknown name {shown(name)}{named}")


def _check_number(value: Any) -> None:
    if isinstance(value, bool) or not isinstance(value, int | float):
        raise ValueError(f"the formula may not hold {shown(str(value))}.")
    try:
        float(value)
    except OverflowError:
        raise ValueError("the formula holds a number that is too large.") from None


def _check_operator(operator: ast.AST) -> None:
    if isinstance(operator, ast.BitXor):
        raise ValueError("the formula has ^; write ** for a power.")
    if type(operator) not in _OPERATORS:
        raise ValueError("the formula may hold no other operators than + - * / ** < <= > >=.")


def _check_call(node: ast.Call) -> None:
    name = ast.unparse(node.func)
    if name not in FUNCTIONS:
        hint = nearest(name, FUNCTIONS)
        named = hint if hint != "." else f"; known are {listed(FUNCTIONS)}."
        raise ValueError(f"the formula has an unknown function {shown(name)}{named}")
    wanted, given = FUNCTIONS[name][1], len(node.args)
    starred = any(isinstance(part, ast.Starred) for part in node.args)
    wrong = given < 2 if wanted is None else given != wanted
    if node.keywords or starred or wrong:
        takes = "two values or more" if wanted is None else f"{wanted} value{'s' * (wanted > 1)}"
        raise ValueError(f"in the formula {name} takes {takes}, not {given}.")


def _value(node: ast.AST, names: Mapping[str, Any]) -> Any:
    if isinstance(node, ast.Name):
        return names[node.id]
    if isinstance(node, ast.Constant):
        return np.float64(str(node.value))
    values = [_value(part, names) for part in _parts(node)]
    if isinstance(node, ast.Call):
        return FUNCTIONS[ast.unparse(node.func)][0](*values)
    if isinstance(node, ast.Compare):
        pairs = zip(node.ops, values, values[1:], strict=False)
        holds = [_OPERATORS[type(operator)](a, b) for operator, a, b in pairs]
        return np.where(reduce(np.logical_and, holds), 1.0, 0.0)
    assert isinstance(node, ast.BinOp | ast.UnaryOp), "every part has been checked"
    return _OPERATORS[type(node.op)](*values)
