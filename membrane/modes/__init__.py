"""The stage from the pencil to its lowest modes, counted and put in order."""

from membrane.modes.coarser import coarser_modes
from membrane.modes.extract import count_up_to, extract, lowest

__all__ = ["coarser_modes", "count_up_to", "extract", "lowest"]
