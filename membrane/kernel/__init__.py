"""The geometry kernel: the only room that knows gmsh and pygmsh."""

from membrane.kernel.session import Kernel
from membrane.kernel.sizes import COARSE, USUAL

__all__ = ["COARSE", "USUAL", "Kernel"]
