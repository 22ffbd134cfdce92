"""The stage from modes to their nodal patterns."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from membrane.nodal.domains import count_domains
from membrane.nodal.edges import mesh_edges
from membrane.nodal.lines import trace
from membrane.nodal.round_head import circles_and_diameters
from membrane.records.arrays import Floats
from membrane.records.modes import Modes
from membrane.records.spectrum import NodalPattern
from membrane.records.study import Edge, Support
from membrane.subdivision import subdivide

LEAST_PARTS = 4


def nodal_patterns(modes: Modes, study_edges: Mapping[str, Edge]) -> tuple[NodalPattern, ...]:
    """Nodal lines, domains and, on a round head, diameters and circles of every mode.

    study_edges : edges by name, as the study has them; one not named is fixed
    """
    edges = {name: study_edges.get(name, Edge()) for name in modes.space.mesh.edges}
    fixed = [name for name, edge in edges.items() if edge.support is Support.FIXED]
    divided = subdivide(modes.space.mesh, max(LEAST_PARTS, modes.space.degree))
    values = divided.values(modes.space, modes.vectors)
    lattice_edges = mesh_edges(modes.space, modes.vectors, divided, values)
    lines = trace(modes.space, modes.vectors, divided, values, lattice_edges, fixed)
    domains = count_domains(modes, values, lattice_edges)
    labels = circles_and_diameters(modes, edges)
    return tuple(
        NodalPattern(
            lines=found,
            length=float(sum(length(line) for line in found)),
            domains=int(count),
            diameters=label.diameters,
            circles=label.circles,
        )
        for found, count, label in zip(lines, domains, labels, strict=True)
    )


def length(line: Floats) -> float:
    """Length of the smooth curve through the points of a polyline (2, n), metres.

    Each chord c is lengthened to c (1 + c^2 k^2 / 24), the arc of the curvature k there
    (Menger's, of three neighbouring points); a circle of 60 points is right to about 1e-6.
    """
    steps = np.diff(line)
    chords = np.hypot(*steps)
    bends = _curvatures(steps, chords, closed=bool((line[:, 0] == line[:, -1]).all()))
    return float(np.sum(chords * (1.0 + (chords * bends) ** 2 / 24.0)))


def _curvatures(steps: Floats, chords: Floats, closed: bool) -> Floats:
    """The mean of the curvatures at both ends of each chord, 1/metres."""
    if chords.size < 2:
        return np.zeros_like(chords)
    if closed:
        steps, chords = np.hstack([steps, steps[:, :1]]), np.append(chords, chords[0])
    cross = steps[0, :-1] * steps[1, 1:] - steps[1, :-1] * steps[0, 1:]
    third = np.hypot(*(steps[:, :-1] + steps[:, 1:]))
    product = chords[:-1] * chords[1:] * third
    at_points = 2.0 * np.abs(cross) / np.where(product > 0.0, product, np.inf)
    if closed:
        around = np.append(at_points[-1], at_points)
    else:
        around = np.concatenate([at_points[:1], at_points, at_points[-1:]])
    return np.asarray(0.5 * (around[:-1] + around[1:]))
