"""Eigensolvers: the lowest modes of a sparse symmetric pencil K u = lambda M u."""
