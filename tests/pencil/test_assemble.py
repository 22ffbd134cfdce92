"""Assembled parts against closed forms and against scikit-fem's own forms."""

import numpy as np
import pytest
from skfem import Basis, ElementTriP2, MeshTri
from skfem.models.poisson import laplace

from membrane.pencil import assemble
from membrane.records.membrane import Contribution, Field, Membrane
from tests import zoo


def contribution(field, where, value=1.0, scale=1.0):
    return Contribution(f"key.{field}", field, where, scale, value)


def membrane(*contributions, fixed=()):
    density = contribution(Field.AREAL_DENSITY, ("head",))
    return Membrane((*contributions, density), fixed)


def energy(matrix, u):
    return float(u @ (matrix @ u))


@pytest.fixture(scope="module")
def disc():
    return zoo.prepared(zoo.DISC, degree=6).mesh


def test_tension_part_is_scikit_fems_laplace():
    square = zoo.straight_square()
    pencil = assemble(membrane(contribution(Field.TENSION, ("head",), np.eye(2))), square, 2)
    basis = Basis(MeshTri(square.vertices, square.triangles), ElementTriP2())
    theirs = laplace.assemble(basis).toarray()
    np.testing.assert_allclose(pencil.stiffness[0].matrix.toarray(), theirs, atol=1e-14)


def test_tensor_energy(disc):
    """u = x + 2y on the unit disc: energy = pi (Txx + 4 Txy + 4 Tyy), elementary."""
    T = np.array([[3.0, 0.7], [0.7, 1.0]])
    pencil = assemble(membrane(contribution(Field.TENSION, ("head",), T)), disc, 6)
    x, y = pencil.space.locations
    exact = np.pi * (3.0 + 4 * 0.7 + 4 * 1.0)
    assert abs(energy(pencil.K, x + 2 * y) / exact - 1) < 1e-9


@pytest.mark.parametrize(
    ("field", "where", "exact"),
    [
        (Field.BEDDING, ("head",), np.pi / 4),  # integral of x^2 over the unit disc
        (Field.EDGE_STIFFNESS, ("rim",), np.pi),  # and along its rim
    ],
)
def test_stiffness_products(disc, field, where, exact):
    pencil = assemble(membrane(contribution(field, where)), disc, 6)
    assert abs(energy(pencil.K, pencil.space.locations[0]) / exact - 1) < 1e-9


def test_edge_mass_and_scale(disc):
    fields = membrane(
        contribution(Field.TENSION, ("head",), np.eye(2)),
        contribution(Field.EDGE_MASS, ("rim",), scale=5.0),
    )
    pencil = assemble(fields, disc, 6)
    edge, _head = pencil.mass
    ones = np.ones(pencil.space.dofs)
    assert (edge.key, edge.scale) == ("key.edge_mass", 5.0)
    assert abs(energy(edge.matrix, ones) / (2 * np.pi) - 1) < 1e-9
    assert abs(energy(pencil.M, ones) / (11 * np.pi) - 1) < 1e-9


def test_doubling_the_quadrature_changes_nothing(disc, monkeypatch):
    fields = membrane(contribution(Field.TENSION, ("head",), np.eye(2)), fixed=("rim",))
    once = assemble(fields, disc, 6)
    order = 2 * (2 * 6 + 2 * (disc.order - 1))
    monkeypatch.setattr("membrane.pencil.space.Discretisation._order", order)
    twice = assemble(fields, disc, 6)
    for side in ("K", "M"):
        a, b = getattr(once, side), getattr(twice, side)
        assert abs(a - b).max() < 1e-9 * abs(a).max()
