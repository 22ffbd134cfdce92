"""The weak forms of a membrane, as the mathematics writes them.

integral of T grad u . grad v + kappa u v over the head + beta u v along its edges
    = lambda (integral of rho u v over the head + mu u v along its edges)
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from skfem.helpers import dot, grad, mul

from membrane.pencil.coefficient import Coefficient
from membrane.records.membrane import Field

Integrand = Callable[[Any, Any, Any], Any]


def tension(T: Coefficient) -> Integrand:
    """T grad u . grad v, with a (2, 2) tensor T(x)."""

    def form(u: Any, v: Any, w: Any) -> Any:
        return dot(mul(T(w.x), grad(u)), grad(v))

    return form


def product(c: Coefficient) -> Integrand:
    """c u v, with a number c(x)."""

    def form(u: Any, v: Any, w: Any) -> Any:
        return c(w.x) * u * v

    return form


@dataclass(frozen=True)
class WeakForm:
    """Where a coefficient field stands in the equation.

    side : "stiffness" or "mass"
    on : "regions" or "edges"
    integrand : makes the bilinear form from the coefficient
    """

    side: str
    on: str
    integrand: Callable[[Coefficient], Integrand]


WEAK_FORMS = {
    Field.TENSION: WeakForm("stiffness", "regions", tension),
    Field.BEDDING: WeakForm("stiffness", "regions", product),
    Field.EDGE_STIFFNESS: WeakForm("stiffness", "edges", product),
    Field.AREAL_DENSITY: WeakForm("mass", "regions", product),
    Field.EDGE_MASS: WeakForm("mass", "edges", product),
}
