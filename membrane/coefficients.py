"""The stage from the study to the membrane: every physical term has its say."""

from __future__ import annotations

from membrane import plugins
from membrane.records.membrane import Contribution, Membrane, OwnForm
from membrane.records.outline import Outline
from membrane.records.study import Study, Support

STANDARD_TERMS = (
    *("tension", "areal_density", "bedding", "edge_stiffness", "edge_mass"),
    *("line_stiffness", "line_mass"),
)
"""Terms that every study has; further ones come from its ``[terms.*]`` tables."""


def coefficients(study: Study, outline: Outline) -> Membrane:
    """All contributions of all terms, and the fixed edges."""
    wanted = [(name, None) for name in STANDARD_TERMS] + list(study.terms.items())
    fields: list[Contribution] = []
    forms: list[OwnForm] = []
    for name, options in wanted:
        term = plugins.load("term", name)
        for found in term.contribute(study, options or term.Options(), outline):
            (forms if isinstance(found, OwnForm) else fields).append(found)
    fixed = tuple(name for name in outline.edges if study.edge(name).support is Support.FIXED)
    return Membrane(tuple(c for c in fields if c.where), fixed, tuple(forms))
