"""The geometry kernel: the only room that knows gmsh and pygmsh."""

from membrane.kernel.session import Kernel

__all__ = ["Kernel"]
