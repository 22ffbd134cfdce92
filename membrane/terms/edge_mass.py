"""The mass of a moving rim."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from membrane.records.membrane import Contribution, Field
from membrane.records.outline import Outline
from membrane.records.study import Study
from membrane.terms.amounts import contribution, is_there


@dataclass(frozen=True)
class Options:
    """None: the mass stands in the study's edges."""


def contribute(study: Study, options: Options, outline: Outline) -> Iterator[Contribution]:
    """One contribution for each edge that carries mass."""
    for name in outline.edges:
        mass = study.edge(name).mass
        if is_there(mass):
            yield contribution(study, f"edges.{name}.mass", Field.EDGE_MASS, (name,), mass)
