"""Where modes are not smooth, and how strongly."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from membrane.kernel import Kernel
from membrane.mesh.corner import Corner
from membrane.mesh.exponents import Exponents, alike
from membrane.mesh.holds import Holds, passes_smoothly
from membrane.mesh.kinks import kinks
from membrane.mesh.rays import Wedge, fans_of, rays_of, wedges_of
from membrane.records.membrane import Membrane
from membrane.records.outline import Outline
from membrane.records.raw_mesh import RawMesh


def corners(
    kernel: Kernel, outline: Outline, membrane: Membrane, raw: RawMesh
) -> tuple[Corner, ...]:
    """Every vertex of the mesh that spoils the convergence of smooth elements, kinks included.

    The leading exponent at a corner of opening w is pi/w between like supports and pi/2w
    between a fixed and a moving one (P. Grisvard, Elliptic Problems in Nonsmooth Domains,
    1985); a whole exponent between straight sides leaves the mode smooth, and curved
    sides add terms one order weaker.
    """
    found = []
    holds = Holds(membrane)
    for vertex, rays in rays_of(kernel, outline, raw).items():
        if passes_smoothly(rays, holds):
            continue
        fans = fans_of(wedges_of(vertex, rays, outline, raw))
        exponents = Exponents(holds, raw.vertices[:, [vertex]])
        corner = _corner(vertex, exponents, fans)
        if corner.terms:
            found.append(corner)
    return _with_kinks(found, kinks(outline, membrane, raw))


def _corner(vertex: int, exponents: Exponents, fans: list[list[Wedge]]) -> Corner:
    """The terms of all fans; bounds only where the tension is not the same both ways."""
    terms = []
    for fan in fans:
        tension = exponents.tension(fan[0])
        even = alike(tension, tension[0, 0] * np.eye(2))
        terms += [term if even else replace(term, exact=False) for term in exponents.terms(fan)]
    return Corner(vertex, tuple(terms))


def _with_kinks(corners: list[Corner], kinks: tuple[Corner, ...]) -> tuple[Corner, ...]:
    """Each vertex once, with all its terms."""
    whole = {corner.vertex: corner for corner in corners}
    for kink in kinks:
        here = whole.get(kink.vertex, kink)
        whole[kink.vertex] = replace(here, terms=tuple({*here.terms, *kink.terms}))
    return tuple(whole.values())
