"""The fast sums against scikit-fem's own, pair by pair."""

import numpy as np
import pytest
from skfem import BilinearForm, CellBasis
from skfem.helpers import dot, grad

from membrane.pencil import build_space
from membrane.pencil.element import element
from membrane.pencil.integrate import integrated
from tests import zoo


def tensor(u, v, w):
    (ux, uy), (vx, vy) = grad(u), grad(v)
    return 2.0 * ux * vx + 0.3 * (ux * vy + uy * vx) + uy * vy


def varying(u, v, w):
    x, y = w.x
    return np.exp(x) * u * v + (1 + y) * dot(grad(u), grad(v))


def mixed(u, v, w):
    """Symmetric, with products of values and slopes, and the size of the triangles."""
    return u * grad(v)[0] + grad(u)[0] * v + w.h * u * v


@pytest.mark.parametrize("form", [tensor, varying, mixed])
@pytest.mark.parametrize(("keys", "degree"), [(zoo.PATCHED, 3), (zoo.L_SHAPE, 4), (zoo.DISC, 6)])
def test_same_matrix_as_scikit_fem(form, keys, degree):
    mesh = zoo.prepared(keys, degree).mesh
    space = build_space(mesh, degree, ())
    ours = space.on_regions(mesh.region_names[:1])
    theirs = CellBasis(
        space.topology,
        element(degree),
        space.mapping,
        quadrature=(ours.X, ours.W),
        elements=ours.tind,
        dofs=space.dofs,
    )
    expected = BilinearForm(form).assemble(theirs)
    found = integrated(form, ours, np.arange(space.space.dofs))
    assert abs(found - expected).max() < 1e-11 * abs(expected).max()


def test_few_points_at_a_time_make_no_difference(monkeypatch):
    mesh = zoo.prepared(zoo.DISC, 4).mesh
    space = build_space(mesh, 4, ("rim",))
    basis, free = space.on_regions(("head",)), space.space.free
    whole = integrated(varying, basis, free)
    monkeypatch.setattr("membrane.pencil.integrate.CHUNK", 1)
    assert abs(integrated(varying, basis, free) - whole).max() < 1e-13 * abs(whole).max()


@pytest.mark.parametrize("keys", [zoo.DISC, zoo.L_SHAPE, zoo.SQUARE])
def test_one_point_is_enough_on_straight_triangles(keys):
    mesh = zoo.prepared(keys, 4).mesh
    space = build_space(mesh, 4, ())
    basis, dofs = space.on_regions(("head",)), np.arange(space.space.dofs)
    assert 0 < np.count_nonzero(basis.straight) <= mesh.size
    assert basis.straight.all() == (keys is zoo.SQUARE)
    whole = integrated(tensor, basis, dofs)
    assert abs(integrated(tensor, basis, dofs, even=True) - whole).max() < 1e-12 * abs(whole).max()


def test_only_free_dofs_are_kept():
    mesh = zoo.prepared(zoo.DISC, 4).mesh
    space = build_space(mesh, 4, ("rim",))
    basis, free = space.on_regions(("head",)), space.space.free
    whole = integrated(varying, basis, np.arange(space.space.dofs))
    assert abs(integrated(varying, basis, free) - whole[free][:, free]).max() < 1e-14
