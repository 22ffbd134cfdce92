"""The membrane: coefficient fields on the regions and edges of an outline."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from enum import StrEnum
from typing import Any

import numpy as np

from membrane.records.arrays import Floats


class Field(StrEnum):
    """The coefficient fields that the weak form knows, with their units."""

    TENSION = "tension"  # N/m, on regions
    AREAL_DENSITY = "areal_density"  # kg/m^2, on regions
    BEDDING = "bedding"  # N/m^3, on regions
    EDGE_STIFFNESS = "edge_stiffness"  # N/m^2, on edges
    EDGE_MASS = "edge_mass"  # kg/m, on edges


@dataclass(frozen=True)
class Contribution:
    """What one study key adds to one coefficient field: scale x value.

    key : the study key that scales it, such as "patches.paste.added_density"
    field : the field that it adds to
    where : names of the regions, or of the edges, that it lives on
    scale : the key's number, SI
    value : what the number multiplies: 1, or a dimensionless (2, 2) tensor
    """

    key: str
    field: Field
    where: tuple[str, ...]
    scale: float
    value: float | Floats = 1.0


@dataclass(frozen=True)
class OwnForm:
    """A term that brings a bilinear form of its own; its brackets are estimates.

    side : "stiffness" or "mass"
    where : names of the regions that it lives on
    form : ``form(u, v, w)``, a scikit-fem integrand, symmetric in u and v, of their values
        and first derivatives
    """

    key: str
    side: str
    where: tuple[str, ...]
    scale: float
    form: Callable[[Any, Any, Any], Any]


@dataclass(frozen=True)
class Membrane:
    """All contributions, and the names of the edges that are held at zero."""

    contributions: tuple[Contribution, ...]
    fixed_edges: tuple[str, ...]
    own_forms: tuple[OwnForm, ...] = ()

    def total(self, field: Field, where: str) -> Any:
        """The constant value of a field on one region or edge, SI."""
        parts = (c for c in self.contributions if c.field is field and where in c.where)
        return sum((c.scale * np.asarray(c.value, dtype=float) for c in parts), np.zeros(()))

    @property
    def moves_rigidly(self) -> bool:
        """True where nothing holds the head: a constant shape costs no energy."""
        held = (Field.BEDDING, Field.EDGE_STIFFNESS)
        springs = any(c.field in held and c.scale > 0.0 for c in self.contributions)
        own = any(form.side == "stiffness" for form in self.own_forms)
        return not (self.fixed_edges or springs or own)
