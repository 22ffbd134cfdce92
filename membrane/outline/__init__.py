"""From a study's shapes to named regions and edges, cut into each other exactly."""

from membrane.outline.draw import draw

__all__ = ["draw"]
