"""The stage from the outline to a curved, graded mesh."""

from membrane.mesh.economy import suited_resolution
from membrane.mesh.make import make_mesh
from membrane.mesh.resolution import (
    Resolution,
    check_affordable,
    region_sizes,
    unknowns,
)

__all__ = [
    "Resolution",
    "check_affordable",
    "make_mesh",
    "region_sizes",
    "suited_resolution",
    "unknowns",
]
