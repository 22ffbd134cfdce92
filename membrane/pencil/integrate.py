"""The matrix of a bilinear form, fast at high degrees."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

import numpy as np
from scipy.sparse import csr_array
from skfem import BilinearForm
from skfem.assembly.basis import CellBasis
from skfem.assembly.form.form import FormExtraParams
from skfem.element import DiscreteField

from membrane.pencil.forms import Integrand
from membrane.records.arrays import Floats, Ints
from membrane.triangle import shapes

CHUNK = 20_000
"""Quadrature points that are worked on at once, so that they stay within the cache."""

CONSTANT = 1e-12
"""Relative variation over a triangle below which a coefficient is constant."""


def integrated(form: Integrand, basis: Any, free: Ints) -> Any:
    """The symmetric matrix (n_free, n_free) of a form in u, v and their first derivatives.

    free : the dofs to keep, rising

    Over triangles the form is called once for each pair of the three unit fields
    u = 1, u = xi and u = eta of the reference triangle. By linearity what it makes of them,
    with the shapes there, is what it makes of all shapes; the sums over the points then are
    products of matrices. Along facets, which are few, scikit-fem sums up pair by pair.
    """
    if not isinstance(basis, CellBasis):
        return BilinearForm(form).assemble(basis)[free][:, free]
    pairs = np.triu_indices(basis.Nbfun)
    local = np.hstack([np.zeros((len(pairs[0]), 0)), *_chunks(form, basis, pairs)])
    number = np.full(basis.N, -1)
    number[free] = np.arange(free.size)
    rows, columns = (number[basis.element_dofs[pair]] for pair in pairs)
    kept = (rows >= 0) & (columns >= 0)
    rows, columns, data = rows[kept], columns[kept], local[kept]
    twice = rows != columns
    places = np.concatenate([rows, columns[twice]]), np.concatenate([columns, rows[twice]])
    return csr_array((np.concatenate([data, data[twice]]), places), shape=(free.size, free.size))


def _chunks(form: Integrand, basis: CellBasis, pairs: tuple[Ints, Ints]) -> Iterator[Floats]:
    """(n_pairs, n) entries of the triangles' matrices, some triangles at a time."""
    products = _products(basis.X, basis.elem.maxdeg, pairs)
    weights = basis.W
    means = [product @ weights for product in products]
    step = max(1, CHUNK // weights.size)
    for start in range(0, basis.nelems, step):
        chosen = slice(start, start + step)
        local = np.zeros((len(pairs[0]), basis.dx[chosen].shape[0]))
        for coefficient, product, mean in zip(
            _coefficients(form, basis, chosen), products, means, strict=True
        ):
            _add(local, coefficient, product * weights, mean)
        yield local


def _add(local: Floats, coefficient: Floats, product: Floats, mean: Floats) -> None:
    """Add the sum over the points of coefficient (n, n_points) x product (n_pairs, n_points)."""
    first = coefficient[:, 0]
    largest = np.abs(coefficient).max(axis=1)
    uneven = np.abs(coefficient - first[:, None]).max(axis=1) > CONSTANT * largest
    if largest.max(initial=0.0) > 0.0:
        local[:, ~uneven] += np.outer(mean, first[~uneven])
        local[:, uneven] += product @ coefficient[uneven].T


def _coefficients(form: Integrand, basis: CellBasis, chosen: slice) -> list[Floats]:
    """(n, n_points) what a form makes of each pair of unit fields, per reference area."""
    triangles = basis.tind[chosen]
    area = basis.dx[chosen] / basis.W
    inverse = basis.mapping.invDF(basis.X, triangles)
    one, none = np.ones_like(area), np.zeros_like(area)
    fields = [DiscreteField(one, np.zeros_like(inverse[0]))]
    fields += [DiscreteField(none, inverse[k]) for k in range(2)]
    known = basis.default_parameters()
    extra = FormExtraParams({name: value[..., chosen, :] for name, value in known.items()})
    return [
        np.broadcast_to(form(fields[a], fields[b], extra), area.shape) * area
        for a in range(3)
        for b in range(a, 3)
    ]


def _products(X: Floats, degree: int, pairs: tuple[Ints, Ints]) -> list[Floats]:
    """For each pair of unit fields the products (n_pairs, n_points) of their shares in shapes."""
    values, slopes = shapes(X, degree)
    shares = [values, *slopes]
    i, j = pairs
    found = []
    for a in range(3):
        found.append(shares[a][i] * shares[a][j])
        for b in range(a + 1, 3):
            found.append(shares[a][i] * shares[b][j] + shares[b][i] * shares[a][j])
    return found
