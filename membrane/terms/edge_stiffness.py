"""The springs of an elastic edge."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from membrane.records.membrane import Contribution, Field
from membrane.records.outline import Outline
from membrane.records.study import Study, Support
from membrane.terms.amounts import contribution


@dataclass(frozen=True)
class Options:
    """None: the stiffness stands in the study's edges."""


def contribute(study: Study, options: Options, outline: Outline) -> Iterator[Contribution]:
    """One contribution for each elastic edge."""
    for name in outline.edges:
        edge = study.edge(name)
        if edge.support is Support.ELASTIC:
            key = f"edges.{name}.stiffness"
            yield contribution(study, key, Field.EDGE_STIFFNESS, (name,), edge.stiffness)
