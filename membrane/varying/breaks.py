"""Along which lines a formula has a jump or a kink, as far as its text tells."""

from __future__ import annotations

import ast
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from itertools import combinations, pairwise
from math import atan2, hypot, pi, sqrt

import numpy as np

from membrane.records.arrays import Floats
from membrane.records.breaks import Break, Circle, Straight
from membrane.varying.formula import PLACES, Formula

ROUNDING = 1e-10
"""Share of an expression's own size that counts as nothing."""

SCAN = 4001
"""Angles at which an expression in theta alone is tried for changes of sign."""

TURN = 2 * pi
ORIGIN = (0.0, 0.0)


@dataclass(frozen=True)
class Breaks:
    """Where a formula breaks.

    known : the lines, metres from the formula's origin
    unknown : expressions that are zero along lines of another kind
    """

    known: tuple[Break, ...]
    unknown: tuple[str, ...]


def breaks_of(formula: Formula) -> Breaks:
    """The lines at which comparisons, abs, sign, min, max or theta switch."""
    known: dict[Break, None] = {}
    unknown: dict[str, None] = {}
    for one, other in _switches(formula.tree):
        found = _zeros(one, other)
        if found is None:
            unknown[f"{ast.unparse(one)} = {ast.unparse(other)}"] = None
        else:
            known.update(dict.fromkeys(found))
    if not _goes_round(formula.tree):
        known[Straight(ORIGIN, pi, begins=True)] = None
    return Breaks(tuple(known), tuple(unknown))


def _switches(tree: ast.expr) -> Iterator[tuple[ast.expr, ast.expr]]:
    """Pairs of expressions; the formula may break where the two are equal."""
    nothing = ast.Constant(0)
    for node in ast.walk(tree):
        match node:
            case ast.Compare(left=first, comparators=others):
                yield from pairwise([first, *others])
            case ast.Call(func=ast.Name(id="abs" | "sign"), args=[part]):
                yield part, nothing
            case ast.Call(func=ast.Name(id="min" | "max"), args=parts):
                yield from combinations(parts, 2)


def _names(*parts: ast.expr) -> set[str]:
    nodes = (node for part in parts for node in ast.walk(part))
    return {node.id for node in nodes if isinstance(node, ast.Name)} & set(PLACES)


def _zeros(one: ast.expr, other: ast.expr) -> list[Break] | None:
    """The lines along which two expressions are equal; None for lines of no plain kind."""
    names = _names(one, other)
    if not names or (ast.unparse(one), ast.unparse(other)) == ("r", "0"):
        return []
    if names == {"theta"}:
        return _rays(one, other)
    first, second, places = _sampled(one, other)
    found = _conic(first - second, places)
    if found is None and (first >= 0.0).all() and (second >= 0.0).all():
        found = _conic(first**2 - second**2, places)
    return _rearranged(one, other) if found is None else found


def _rearranged(one: ast.expr, other: ast.expr) -> list[Break] | None:
    """The same of |a| = b as a = b and a = -b, of a - b = c as a = b + c, of c = a as a = c."""
    match one, other:
        case ast.Call(func=ast.Name(id="abs"), args=[part]), _:
            either = _zeros(part, other), _zeros(part, ast.UnaryOp(ast.USub(), other))
            return None if None in either else [line for some in either for line in some or ()]
        case ast.BinOp(left=left, op=ast.Sub(), right=right), _:
            return _zeros(left, ast.BinOp(right, ast.Add(), other))
        case ast.Constant(), ast.BinOp() | ast.Call():
            return _zeros(other, one)
        case ast.Name(id="r") | ast.Call(func=ast.Name(id="hypot" | "sqrt")), _:
            below = not _names(other) and float(Formula("", other)(*np.zeros((2, 1)))[0]) < 0.0
            return [] if below else None
    return None


def _difference(one: ast.expr, other: ast.expr) -> Formula:
    return Formula("", ast.BinOp(one, ast.Sub(), other))


def _rays(one: ast.expr, other: ast.expr) -> list[Break]:
    """From the origin, at the angles between which an expression in theta changes its sign."""
    formula = _difference(one, other)

    def at(angle: Floats) -> Floats:
        return formula(np.cos(angle), np.sin(angle))

    scan = np.linspace(-pi, pi, SCAN)[1:-1] + 1e-4
    values = at(scan)
    changes = np.nonzero(values[1:] * values[:-1] < 0.0)[0]
    angles = [_root(at, *scan[[k, k + 1]].tolist()) for k in changes]
    return [Straight(ORIGIN, angle, begins=True) for angle in angles]


def _root(at: Callable[[Floats], Floats], low: float, high: float) -> float:
    """Where a function of an array changes its sign."""
    from scipy.optimize import brentq

    return float(brentq(lambda angle: float(at(np.array([angle]))[0]), low, high, xtol=1e-15))


def _sampled(one: ast.expr, other: ast.expr) -> tuple[Floats, Floats, Floats]:
    """Both expressions, and the places (2, n), where both have a value."""
    places = np.random.default_rng(0).uniform(-1.0, 1.0, (2, 60))
    first, second = (Formula("", part)(*places) for part in (one, other))
    sound = np.isfinite(first) & np.isfinite(second)
    return first[sound], second[sound], places[:, sound]


def _conic(values: Floats, places: Floats) -> list[Break] | None:
    """The lines where c + p x + q y + s x^2 + t y^2 is zero, None where values are not such."""
    x, y = places
    basis = np.stack([np.ones_like(x), x, y, x * x, y * y], axis=1)
    if len(values) < 2 * basis.shape[1]:
        return None
    found = np.linalg.lstsq(basis, values, rcond=None)[0]
    size = np.abs(values).max()
    if np.abs(basis @ found - values).max() > ROUNDING * size:
        return None
    c, p, q, s, t = np.where(np.abs(found) > ROUNDING * size, found, 0.0).tolist()
    if s == t == 0.0:
        return _straight(c, p, q)
    if abs(s - t) <= ROUNDING * size:
        return _circle(c / s, p / s, q / s)
    if t == 0.0 and q == 0.0:
        return [line for x in _roots(c / s, p / s) for line in _straight(-x, 1.0, 0.0)]
    if s == 0.0 and p == 0.0:
        return [line for y in _roots(c / t, q / t) for line in _straight(-y, 0.0, 1.0)]
    return None


def _straight(c: float, p: float, q: float) -> list[Break]:
    if p == q == 0.0:
        return []
    square = p * p + q * q
    return [Straight((-c * p / square, -c * q / square), atan2(p, -q))]


def _circle(c: float, p: float, q: float) -> list[Break]:
    """(x + p/2)^2 + (y + q/2)^2 = (p/2)^2 + (q/2)^2 - c."""
    square = hypot(p / 2, q / 2) ** 2 - c
    return [Circle((-p / 2, -q / 2), sqrt(square))] if square > 0.0 else []


def _roots(c: float, p: float) -> list[float]:
    """Of x^2 + p x + c."""
    square = p * p / 4 - c
    return [-p / 2 - sqrt(square), -p / 2 + sqrt(square)] if square > 0.0 else []


def _goes_round(tree: ast.expr) -> bool:
    """Whether nothing changes when theta grows by a turn."""
    if "theta" not in _names(tree):
        return True
    x, y = np.random.default_rng(1).uniform(-1.0, 1.0, (2, 60))
    here, later = (Formula("", tree).at(x, y, turn) for turn in (0.0, TURN))
    both = np.isfinite(here) & np.isfinite(later)
    size = np.abs(here[both]).max(initial=0.0)
    return bool(np.all(np.abs(here - later)[both] <= ROUNDING * size))
