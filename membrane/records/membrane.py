"""The membrane: coefficient fields on the regions and edges of an outline."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from dataclasses import field as dataclass_field
from enum import StrEnum
from typing import Any

import numpy as np

from membrane.records.arrays import Floats
from membrane.records.breaks import Place
from membrane.records.function import Function
from membrane.records.outline import Samples


class Field(StrEnum):
    """The coefficient fields that the weak form knows, with their units."""

    TENSION = "tension"  # N/m, on regions
    AREAL_DENSITY = "areal_density"  # kg/m^2, on regions
    BEDDING = "bedding"  # N/m^3, on regions
    EDGE_STIFFNESS = "edge_stiffness"  # N/m^2, on edges
    EDGE_MASS = "edge_mass"  # kg/m, on edges
    LINE_STIFFNESS = "line_stiffness"  # N/m^2, on line loads
    LINE_MASS = "line_mass"  # kg/m, on line loads


@dataclass(frozen=True)
class Contribution:
    """What one study key adds to one coefficient field: scale x value.

    key : the study key that scales it, such as "patches.paste.added_density"
    field : the field that it adds to
    where : names of the regions, edges or line loads that it lives on
    scale : the key's number, SI; 1 where the key gives a function of place
    value : what the number multiplies: 1, a dimensionless (2, 2) tensor, or the function
    """

    key: str
    field: Field
    where: tuple[str, ...]
    scale: float
    value: float | Floats | Function = 1.0

    def at(self, points: Floats) -> Floats:
        """Its share of the field, SI, at ``points`` (2, n): (n,), or (n, 2, 2) of a tensor."""
        if isinstance(self.value, Function):
            return self.scale * np.moveaxis(self.value(*points), -1, 0)
        value = np.asarray(self.value, dtype=float)
        return np.broadcast_to(self.scale * value, (points.shape[1], *value.shape))


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
    """All contributions, and the names of the edges that are held at zero.

    samples : name of a region, an edge or a line load -> where its varying fields are looked at
    """

    contributions: tuple[Contribution, ...]
    fixed_edges: tuple[str, ...]
    own_forms: tuple[OwnForm, ...] = ()
    samples: Mapping[str, Samples] = dataclass_field(default_factory=dict)

    def parts(self, field: Field, where: str) -> tuple[Contribution, ...]:
        """The contributions to a field on one region, edge or line load."""
        return tuple(c for c in self.contributions if c.field is field and where in c.where)

    def varies(self, field: Field, where: str) -> bool:
        """Whether a field is a function of place on one region, edge or line load."""
        return any(isinstance(c.value, Function) for c in self.parts(field, where))

    def at(self, field: Field, where: str, points: Floats) -> Floats:
        """A field on a region, edge or line load, SI, at ``points`` (2, n): (n,), or (n, 2, 2)."""
        parts = [c.at(points) for c in self.parts(field, where)]
        return sum(parts[1:], parts[0]) if parts else np.zeros(points.shape[1])

    def sampled(self, field: Field, where: str) -> Floats:
        """A field on one region, edge or line load, SI, at its samples: (n,), or (n, 2, 2).

        n is 1 where the field is constant.
        """
        varies = self.varies(field, where)
        return self.at(field, where, self.samples[where].points if varies else np.zeros((2, 1)))

    def total(self, field: Field, where: str) -> Any:
        """The value of a field on one region, edge or line load, SI; its mean where it varies."""
        values = self.sampled(field, where)
        weights = self.samples[where].weights if self.varies(field, where) else np.ones(1)
        return np.tensordot(weights, values, 1)

    def breaks_at(self, field: Field, where: str, place: Place, slack: float) -> bool:
        """Whether a field on one region, edge or line load may jump or kink at a place."""
        values = (c.value for c in self.parts(field, where))
        return any(isinstance(v, Function) and v.breaks_at(place, slack) for v in values)

    @property
    def kinks(self) -> Floats:
        """(2, n), metres: where a field is not smooth."""
        values = (c.value for c in self.contributions)
        places = [v.places_of_kinks for v in values if isinstance(v, Function)]
        return np.unique(np.hstack([np.empty((2, 0)), *places]), axis=1)

    @property
    def moves_rigidly(self) -> bool:
        """True where nothing holds the head: a constant shape costs no energy."""
        held = (Field.BEDDING, Field.EDGE_STIFFNESS, Field.LINE_STIFFNESS)
        springs = any(c.field in held and c.scale > 0.0 for c in self.contributions)
        own = any(form.side == "stiffness" for form in self.own_forms)
        return not (self.fixed_edges or springs or own)
