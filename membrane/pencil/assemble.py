"""Stiffness and mass matrices, one named part for each contribution."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

from membrane.pencil.coefficient import coefficient
from membrane.pencil.forms import WEAK_FORMS
from membrane.pencil.integrate import integrated
from membrane.pencil.space import Discretisation, build_space
from membrane.records.function import Function
from membrane.records.membrane import Membrane
from membrane.records.mesh import Mesh
from membrane.records.pencil import Part, Pencil


def assemble(membrane: Membrane, mesh: Mesh, degree: int) -> Pencil:
    """The pencil of a membrane on a mesh, by elements of a degree.

    Each part is the matrix of one contribution at 1 SI unit of the key that scales it.
    """
    discretisation = build_space(mesh, degree, membrane.fixed_edges)
    sides: dict[str, list[Part]] = {"stiffness": [], "mass": []}
    for side, part in _parts(membrane, discretisation):
        sides[side].append(part)
    return Pencil(
        space=discretisation.space,
        stiffness=tuple(sides["stiffness"]),
        mass=tuple(sides["mass"]),
        moves_rigidly=membrane.moves_rigidly,
    )


def _parts(membrane: Membrane, discretisation: Discretisation) -> Iterator[tuple[str, Part]]:
    on_regions = cache(discretisation.on_regions)
    basis_on = {
        "regions": on_regions,
        "edges": cache(discretisation.on_edges),
        "lines": cache(discretisation.on_lines),
    }
    free = discretisation.space.free
    for c in membrane.contributions:
        weak = WEAK_FORMS[c.field]
        varying = isinstance(c.value, Function)
        basis = basis_on[weak.on](c.where, varying)
        form = weak.integrand(coefficient(c))
        yield weak.side, Part(c.key, c.scale, integrated(form, basis, free, even=not varying))
    for own in membrane.own_forms:
        yield own.side, Part(own.key, own.scale, integrated(own.form, on_regions(own.where), free))
