"""Frequencies against one number of a study, branch by branch."""

from __future__ import annotations

from dataclasses import dataclass

from membrane.records.arrays import Floats, Ints


@dataclass(frozen=True)
class Panel:
    """One walk along the axis.

    title : what is the same all along it, "" where nothing else is swept
    frequencies : (n_places, count), Hz, rising at each place; NaN where there is none
    branches : (n_places, count), the branch of each of them, from 1; 0 for none
    lost : (branch, place) where a branch could not be followed on
    """

    title: str
    frequencies: Floats
    branches: Ints
    lost: tuple[tuple[int, float], ...] = ()


@dataclass(frozen=True)
class Diagram:
    """Walks along one axis.

    label : of the axis, with its unit
    places : (n_places,), rising or falling, in that unit
    """

    title: str
    label: str
    places: Floats
    panels: tuple[Panel, ...]
    logarithmic: bool = False
