"""Round heads: the nodal diameters and circles by which the trade names their modes."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import TypeAlias

import numpy as np
from numpy.typing import NDArray

from membrane.evaluate import locate, values_at
from membrane.records.arrays import Floats
from membrane.records.mesh import Mesh
from membrane.records.modes import Modes
from membrane.records.study import Edge, Support
from membrane.sides import lie_on, nodes_on

ROUND = 1e-6
"""How far, as a share of the radius, an edge may leave its circle."""

DOMINANT = 0.9
"""Share of a mode's energy that one number of diameters must hold to name the mode."""

SMALL = 1e-3
"""Where the radial profile stays below this share of its maximum, its sign means nothing."""

MOST_ANGLES = 200

Spectra: TypeAlias = NDArray[np.complex128]


@dataclass(frozen=True)
class Label:
    """The (m, n) of a mode, None where it has none."""

    diameters: int | None = None
    circles: int | None = None


@dataclass(frozen=True)
class _Ring:
    """A disc (inner radius 0) or an annulus, metres."""

    centre: Floats
    inner: float
    outer: float
    rim_held: bool


def circles_and_diameters(modes: Modes, edges: Mapping[str, Edge]) -> list[Label]:
    """The (m, n) of every mode; nothing where the head is not round.

    n counts the circles where the angular component changes its sign along the radius, and
    a held rim (fixed or elastic) as one more: the lowest mode of a drum head is (0, 1).
    """
    count = modes.vectors.shape[1]
    ring = _ring(modes.space.mesh, edges)
    if ring is None:
        return [Label()] * count
    spectra, radii = _angular_spectra(modes, ring)
    return [_label(spectrum, radii, ring.rim_held) for spectrum in spectra]


def _ring(mesh: Mesh, edges: Mapping[str, Edge]) -> _Ring | None:
    """The ring that the edges bound, None where they are not circles about one centre."""
    points = {name: nodes_on(mesh, lie_on(mesh, [name])) for name in edges}
    if not points:
        return None
    centre = _centre(next(iter(points.values())))
    radii = {name: np.hypot(*(found - centre[:, None])) for name, found in points.items()}
    outer = max(float(r.max()) for r in radii.values())
    if any(np.ptp(r) > ROUND * outer for r in radii.values()):
        return None
    rim = {name for name, r in radii.items() if r.max() > (1.0 - ROUND) * outer}
    inner = max((float(r.mean()) for name, r in radii.items() if name not in rim), default=0.0)
    first, *others = (edges[name] for name in rim)
    if any(edge != first for edge in others) or _goes_on_within(mesh, centre, inner):
        return None
    held = all(edges[name].support is not Support.FREE for name in rim)
    return _Ring(centre, inner, outer, held)


def _goes_on_within(mesh: Mesh, centre: Floats, inner: float) -> bool:
    """Whether the head reaches into its inner circle, which is then the arc of a slit."""
    turn = 2 * np.pi * np.arange(MOST_ANGLES) / MOST_ANGLES
    circle = (1.0 - 1e-3) * inner * np.array([np.cos(turn), np.sin(turn)])
    return inner > 0.0 and bool((locate(mesh, centre[:, None] + circle).triangle >= 0).any())


def _centre(points: Floats) -> Floats:
    """(2,): centre of the circle of least squares, x^2 + y^2 - 2 a x - 2 b y = c."""
    middle = points.mean(axis=1)
    x, y = points - middle[:, None]
    system = np.stack([2 * x, 2 * y, np.ones_like(x)], axis=1)
    a, b, _ = np.linalg.lstsq(system, x**2 + y**2, rcond=None)[0]
    return np.asarray(middle + np.array([a, b]))


def _angular_spectra(modes: Modes, ring: _Ring) -> tuple[Spectra, Floats]:
    """Fourier coefficients (n, n_radii, n_orders) on circles of the radii (n_radii,)."""
    count = modes.vectors.shape[1]
    n_radii = 8 + int(2 * np.sqrt(count))
    n_angles = min(12 + count, MOST_ANGLES)  # a narrow annulus has up to count / 2 diameters
    radii = ring.inner + (ring.outer - ring.inner) * (np.arange(n_radii) + 0.5) / n_radii
    turn = np.exp(2j * np.pi * np.arange(n_angles) / n_angles)
    grid = np.outer(radii, turn).ravel()
    points = ring.centre[:, None] + np.stack([grid.real, grid.imag])
    values = values_at(modes.space, modes.vectors, points).reshape(count, n_radii, n_angles)
    return np.fft.rfft(np.nan_to_num(values), axis=2), radii


def _label(spectrum: Spectra, radii: Floats, rim_held: bool) -> Label:
    """The label of one mode from its coefficients (n_radii, n_orders)."""
    energy = radii @ np.abs(spectrum) ** 2
    energy[1:] *= 2.0
    order = int(np.argmax(energy))
    if energy[order] < DOMINANT * energy.sum():
        return Label()
    component = spectrum[:, order]
    phase = 0.5 * np.angle(np.sum(radii * component**2))
    profile = np.real(component * np.exp(-1j * phase))
    sure = profile[np.abs(profile) > SMALL * np.abs(profile).max()]
    changes = int(np.count_nonzero(np.diff(np.sign(sure))))
    return Label(order, changes + int(rim_held))
