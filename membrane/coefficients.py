"""The stage from the study to the membrane: every physical term has its say."""

from __future__ import annotations

import numpy as np

from membrane import plugins
from membrane.errors import Problem, StudyError
from membrane.records.function import Function
from membrane.records.membrane import Contribution, Field, Membrane, OwnForm
from membrane.records.outline import Outline
from membrane.records.study import Study, Support
from membrane.varying import numbers_at

STANDARD_TERMS = ("tension", "areal_density", "bedding", "edge_stiffness", "edge_mass")
"""Terms that every study has; further ones come from its ``[terms.*]`` tables."""


def coefficients(study: Study, outline: Outline) -> Membrane:
    """All contributions of all terms, and the fixed edges.

    Raises StudyError where a varying coefficient is not sound somewhere on the head.
    """
    wanted = [(name, None) for name in STANDARD_TERMS] + list(study.terms.items())
    fields: list[Contribution] = []
    forms: list[OwnForm] = []
    for name, options in wanted:
        term = plugins.load("term", name)
        for found in term.contribute(study, options or term.Options(), outline):
            (forms if isinstance(found, OwnForm) else fields).append(found)
    fixed = tuple(name for name in outline.edges if study.edge(name).support is Support.FIXED)
    contributions = tuple(c for c in fields if c.where)
    membrane = Membrane(contributions, fixed, tuple(forms), outline.samples)
    _check_functions(membrane)
    _check_tension(membrane, outline)
    return membrane


def _check_functions(membrane: Membrane) -> None:
    """Every varying coefficient has sound numbers at the samples."""
    for c in membrane.contributions:
        if not isinstance(c.value, Function):
            continue
        for where in c.where:
            numbers_at(c.key, c.value, *membrane.samples[where].points)


def _check_tension(membrane: Membrane, outline: Outline) -> None:
    """A varying tension is positive in every direction at the samples."""
    for region in (region.name for region in outline.regions):
        if not membrane.varies(Field.TENSION, region):
            continue
        least = np.linalg.eigvalsh(membrane.sampled(Field.TENSION, region))[:, 0]
        worst = int(np.argmin(least))
        if least[worst] <= 0.0:
            x, y = membrane.samples[region].points[:, worst]
            key = membrane.parts(Field.TENSION, region)[0].key.rpartition(".")[0]
            raise StudyError(
                [
                    Problem(
                        key,
                        "a membrane must be under tension in every direction; at "
                        f"x = {x:.6g} m, y = {y:.6g} m one of them has {least[worst]:.6g} N/m.",
                    )
                ]
            )
