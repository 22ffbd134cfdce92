"""Meshes of an outline, each finer than the last, with the matrices of the study's own head."""

from __future__ import annotations

from collections import OrderedDict
from dataclasses import dataclass

from membrane.coefficients import coefficients
from membrane.kernel import Kernel
from membrane.mesh import Resolution, make_mesh, suited_resolution
from membrane.outline import draw
from membrane.pencil import assemble
from membrane.records.membrane import Membrane
from membrane.records.mesh import Mesh
from membrane.records.outline import Outline
from membrane.records.pencil import Pencil
from membrane.records.study import Study
from membrane.sweep.solving.shaping import shape_of

HELD = 3
"""Outlines whose meshes and matrices a process keeps."""

FINER = 10.0
"""Excess of the error that the next mesh is made for. What a point would need exactly would
make the meshes depend on which point came first."""


@dataclass(frozen=True)
class Rung:
    """A mesh of an outline, and the pencils of the study's own head on it."""

    resolution: Resolution
    outline: Outline
    membrane: Membrane
    mesh: Mesh
    fine: Pencil
    coarse: Pencil


class Ladders:
    """The rungs of the outlines that were last asked for, made when they are needed.

    guaranteed : whether the meshes are to be such that the proofs cover them
    """

    def __init__(self, guaranteed: bool) -> None:
        self._guaranteed = guaranteed
        self._held: OrderedDict[str, list[Rung]] = OrderedDict()

    def rung(self, own: Study, place: int) -> Rung:
        """The mesh of a place, from 0, for a study's own head. Raises MembraneError."""
        name = shape_of(own)
        ladder = self._held.setdefault(name, [])
        self._held.move_to_end(name)
        while len(self._held) > HELD:
            self._held.popitem(last=False)
        while len(ladder) <= place:
            finer = ladder[-1].resolution.finer(FINER) if ladder else None
            ladder.append(made(own, finer, self._guaranteed))
        return ladder[place]


def made(own: Study, resolution: Resolution | None, guaranteed: bool) -> Rung:
    """A mesh of a study's outline and its pencils; the first that should do if none is given."""
    with Kernel.session() as kernel:
        outline = draw(kernel, own)
        membrane = coefficients(own, outline)
        wanted = resolution or suited_resolution(kernel, outline, membrane, own.modes)
        used = wanted.of_proofs if guaranteed else wanted
        mesh = make_mesh(kernel, outline, membrane, own.modes, used, fans=not guaranteed)
    fine, coarse = (
        assemble(membrane, mesh, degree) for degree in (wanted.degree, wanted.coarser_degree)
    )
    return Rung(wanted, outline, membrane, mesh, fine, coarse)
