"""The stage from the outline to a curved, graded mesh."""

from membrane.mesh.make import make_mesh
from membrane.mesh.resolution import (
    Resolution,
    check_affordable,
    first_resolution,
    region_sizes,
    unknowns,
)

__all__ = [
    "Resolution",
    "check_affordable",
    "first_resolution",
    "make_mesh",
    "region_sizes",
    "unknowns",
]
