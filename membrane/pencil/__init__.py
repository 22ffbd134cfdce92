"""The stage from membrane and mesh to the pencil; the only room that knows scikit-fem."""

from membrane.pencil.assemble import assemble
from membrane.pencil.rescale import rescaled
from membrane.pencil.space import build_space

__all__ = ["assemble", "build_space", "rescaled"]
