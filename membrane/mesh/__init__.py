"""The stage from the outline to a curved, graded mesh."""

from membrane.mesh.economy import suited_resolution
from membrane.mesh.make import make_mesh
from membrane.mesh.resolution import Resolution

__all__ = ["Resolution", "make_mesh", "suited_resolution"]
