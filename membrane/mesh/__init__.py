"""The stage from the outline to a curved, graded mesh."""

from membrane.mesh.make import make_mesh
from membrane.mesh.resolution import Resolution, first_resolution

__all__ = ["Resolution", "first_resolution", "make_mesh"]
