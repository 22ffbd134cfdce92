"""How short the waves are that run along heavy lines and edges."""

from __future__ import annotations

from collections.abc import Mapping
from math import pi

import numpy as np

from membrane.mesh.resolution import highest, slowness
from membrane.records.membrane import Field, Membrane
from membrane.records.outline import Curve, Outline
from membrane.records.study import ModesWanted

_HALVINGS = 60


def curve_sizes(
    outline: Outline, membrane: Membrane, wanted: ModesWanted, phase: float
) -> dict[int, float]:
    """Longest edge beside each curve that bears mass, metres.

    A wave along a line of mass mu decays away from it like exp(-a d) with 2 T a = mu w^2,
    T a = mu w^2 at an edge, and has k^2 = w^2 rho/T + a^2: put exp(i k s - a d) into the
    equation and into the line's jump of slope. An edge is ``phase`` over (k^2 + a^2)^(1/2).
    """
    masses = {curve.tag: _mass(membrane, curve) for curve in outline.curves}
    masses = {tag: mass for tag, mass in masses.items() if mass > 0.0}
    if not masses:
        return {}
    waves = _Waves(outline, membrane, masses)
    omega = highest(outline, membrane, wanted)
    if not wanted.up_to:
        omega = waves.lowered(omega, wanted.count)
    return {tag: phase / waves.change(tag, omega) for tag in waves.decays}


class _Waves:
    """Wave numbers along the curves of a head that bear mass."""

    def __init__(self, outline: Outline, membrane: Membrane, masses: Mapping[int, float]) -> None:
        names = [region.name for region in outline.regions]
        self.slowest = max(slowness(membrane, name) for name in names)
        tensions = [np.linalg.eigvalsh(membrane.total(Field.TENSION, name)) for name in names]
        softest = float(np.min(tensions))
        self.decays = {tag: mass / softest for tag, mass in masses.items()}
        self.lengths = {c.tag: c.length for c in outline.curves if c.tag in self.decays}

    def number(self, tag: int, omega: float) -> float:
        """Wave number along a curve, 1/m, at an angular frequency."""
        return float(np.hypot(self.slowest * omega, self.decays[tag] * omega**2))

    def change(self, tag: int, omega: float) -> float:
        """How fast a wave along a curve changes, along and away from it together, 1/m."""
        return float(np.hypot(self.number(tag, omega), self.decays[tag] * omega**2))

    def lowered(self, omega: float, count: int) -> float:
        """At most ``omega``: where the waves along curves alone make ``count`` modes."""
        low, high = 0.0, omega
        for _ in range(_HALVINGS):
            middle = 0.5 * (low + high)
            if self._modes(middle) > count:
                high = middle
            else:
                low = middle
        return high

    def _modes(self, omega: float) -> float:
        """How many half waves the curves hold beyond those of the head beside them."""
        beyond = (self.number(tag, omega) - self.slowest * omega for tag in self.decays)
        return sum(k * self.lengths[t] / pi for k, t in zip(beyond, self.decays, strict=True))


def _mass(membrane: Membrane, curve: Curve) -> float:
    """Mass along a curve that hangs on each of its sides, kg/m."""
    along = sum(float(membrane.total(Field.LINE_MASS, line)) for line in curve.lines)
    edges = (float(membrane.total(Field.EDGE_MASS, edge)) for edge in curve.edges)
    return max(0.5 * along, *edges, 0.0)
