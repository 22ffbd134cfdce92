"""The reference triangle (0, 0), (1, 0), (0, 1): polynomials, nodes and shapes of any degree.

A triangle's local dofs are its vertices, then the edges 0-1, 1-2 and 0-2, each from the
lower to the higher vertex, then the interior: the order that scikit-fem uses.
"""

from membrane.triangle.fluxes import across, flux_shapes
from membrane.triangle.jacobi import gauss
from membrane.triangle.lattice import Lattice, lattice
from membrane.triangle.nodes import EDGES, lobatto, nodes
from membrane.triangle.rule import collapsed_rule
from membrane.triangle.shapes import shapes
from membrane.triangle.tabulated import tabulated

__all__ = [
    "EDGES",
    "Lattice",
    "across",
    "collapsed_rule",
    "flux_shapes",
    "gauss",
    "lattice",
    "lobatto",
    "nodes",
    "shapes",
    "tabulated",
]
