"""Varying coefficients in the matrices, against integrals done by hand."""

from __future__ import annotations

import numpy as np
import pytest

from membrane.errors import StudyError
from membrane.pencil import assemble
from membrane.records.function import Function
from membrane.records.membrane import Contribution, Field, Membrane
from membrane.records.sign import Sign
from tests import zoo

MESH = zoo.straight_square()


def function(rule, **more):
    return Function({"formula": "by hand"}, rule, **more)


def matrix(field, value, where):
    pencil = assemble(Membrane((Contribution("key", field, (where,), 1.0, value),), ()), MESH, 4)
    (part,) = pencil.stiffness + pencil.mass
    return part.matrix, pencil.space.locations


@pytest.mark.parametrize("field", [Field.AREAL_DENSITY, Field.BEDDING])
def test_density_and_bed(field):
    """The integral of (x + y^2) u^2 over the unit square with u = x: 1/4 + 1/9."""
    found, (x, _) = matrix(field, function(lambda x, y: x + y**2), "head")
    assert abs(x @ found @ x - 13 / 36) < 1e-13


def test_tension():
    """The integral of grad u . T grad u, u = x y, T = x diag(1, 3): 1/6 + 3/4."""
    tensor = np.diag([1.0, 3.0])
    found, (x, y) = matrix(Field.TENSION, function(lambda x, y: x).times(tensor), "head")
    assert abs((x * y) @ found @ (x * y) - (1 / 6 + 3 / 4)) < 1e-13


@pytest.mark.parametrize("field", [Field.EDGE_STIFFNESS, Field.EDGE_MASS])
def test_edges(field):
    """The integral of x u^2 around the unit square with u = 1: 1/2 + 1/2 + 1."""
    found, (x, _) = matrix(field, function(lambda x, y: x), "rim")
    assert abs(np.ones_like(x) @ found @ np.ones_like(x) - 2.0) < 1e-13


def test_a_number_that_is_not_allowed_is_found_at_the_quadrature_points():
    negative = function(lambda x, y: x - 0.05, sign=Sign.POSITIVE, noun="an areal density")
    with pytest.raises(StudyError, match="key: expected a positive areal density everywhere"):
        matrix(Field.AREAL_DENSITY, negative, "head")
