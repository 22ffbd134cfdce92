"""How points are answered: the one place of the sweeps that knows the order of the stages."""

from membrane.sweep.solving.full import FullSolves
from membrane.sweep.solving.reduced import ReducedSolves
from membrane.sweep.solving.sample import Sample, timed_sample
from membrane.sweep.solving.shaping import shaping_axes

__all__ = ["FullSolves", "ReducedSolves", "Sample", "shaping_axes", "timed_sample"]
