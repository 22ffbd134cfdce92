"""How points are answered: the one place of the sweeps that knows the order of the stages."""

from membrane.sweep.solving.axis_units import units_of
from membrane.sweep.solving.following import followed, why_not_followed
from membrane.sweep.solving.full import FullSolves
from membrane.sweep.solving.reduced import LEAST, ReducedSolves, pays
from membrane.sweep.solving.sample import Sample, timed_sample
from membrane.sweep.solving.shaping import shaping_axes

__all__ = [
    "LEAST",
    "FullSolves",
    "ReducedSolves",
    "Sample",
    "followed",
    "pays",
    "shaping_axes",
    "timed_sample",
    "units_of",
    "why_not_followed",
]
