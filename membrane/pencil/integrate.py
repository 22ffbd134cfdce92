"""The matrix of a bilinear form, fast at high degrees."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from itertools import combinations_with_replacement
from typing import Any

import numpy as np
from skfem import BilinearForm
from skfem.assembly.form.form import FormExtraParams
from skfem.element import DiscreteField

from membrane.pencil.forms import Integrand
from membrane.pencil.space import RegionBasis
from membrane.records.arrays import Floats, Ints
from membrane.triangle import tabulated

CHUNK = 6_000
"""Quadrature points that are worked on at once, so that they stay within the cache."""

CONSTANT = 1e-12
"""Relative variation over a triangle below which a coefficient is constant."""

Coefficients = Mapping[tuple[int, int], Floats]
"""For each pair of unit fields, the first not after the second."""


def integrated(form: Integrand, basis: Any, free: Ints, even: bool = False) -> Any:
    """The symmetric matrix (n_free, n_free) of a form in u, v and their first derivatives.

    free : the dofs to keep, rising; those of a vertex, facet or triangle all or none
    even : whether the form's own numbers are the same all over each triangle; where its sides
        are straight, the form is then called at one point only

    Over triangles the form is called once for each pair of the three unit fields
    u = 1, u = xi and u = eta of the reference triangle. By linearity what it makes of them,
    with the shapes there, is what it makes of all shapes; the sums over the points then are
    products of matrices. Along facets, which are few, scikit-fem sums up pair by pair.
    """
    if not isinstance(basis, RegionBasis):
        return BilinearForm(form).assemble(basis)[free][:, free]
    table = _Table(*tabulated(basis.X, basis.elem.maxdeg), basis.W)
    local = np.empty((basis.nelems, basis.Nbfun, basis.Nbfun))
    for chosen, points in _batches(basis, even):
        local[chosen] = table.matrices(_coefficients(form, basis, chosen, points))
    return basis.pattern(free).matrix(local)


def _batches(basis: RegionBasis, even: bool) -> Iterator[tuple[Ints, slice]]:
    """Triangles to be worked on at once, and at which points of the rule."""
    simple = basis.straight if even else np.zeros(basis.nelems, dtype=bool)
    for part, points in ((simple, slice(1)), (~simple, slice(None))):
        numbers = np.nonzero(part)[0]
        step = max(1, CHUNK // basis.W[points].size)
        for start in range(0, len(numbers), step):
            yield numbers[start : start + step], points


def _coefficients(form: Integrand, basis: RegionBasis, chosen: Ints, points: slice) -> Coefficients:
    """What a form makes of each pair of unit fields, per reference area, where it is not 0."""
    at, triangles = basis.X[:, points], basis.tind[chosen]
    area = np.abs(basis.mapping.detDF(at, triangles))
    inverse = basis.mapping.invDF(at, triangles)
    one, none = np.ones_like(area), np.zeros_like(area)
    fields = [DiscreteField(one, np.zeros_like(inverse[0]))]
    fields += [DiscreteField(none, inverse[k]) for k in range(2)]
    # what scikit-fem tells a form too: places and the triangles' sizes
    places = DiscreteField(basis.mapping.F(at, triangles))
    extra = FormExtraParams({"x": places, "h": DiscreteField(np.sqrt(area))})
    pairs = combinations_with_replacement(range(3), 2)
    made = {(a, b): form(fields[a], fields[b], extra) for a, b in pairs}
    return {ab: np.broadcast_to(c, area.shape) * area for ab, c in made.items() if np.any(c)}


class _Table:
    """The unit fields' shares in the shapes at the points of a rule: sums over the points."""

    def __init__(self, values: Floats, slopes: Floats, weights: Floats) -> None:
        self.shares = np.concatenate([values[None], slopes])
        self.weights = weights
        self._means: dict[tuple[int, int], Floats] = {}

    def matrices(self, coefficients: Coefficients) -> Any:
        """(n, n_local, n_local) matrices of triangles with coefficients (n, n_points)."""
        if not coefficients:
            return 0.0
        if next(iter(coefficients.values())).shape[1] == 1:
            return self._even({ab: c[:, 0] for ab, c in coefficients.items()})
        uneven = np.any([_uneven(c) for c in coefficients.values()], axis=0)
        local = np.empty((len(uneven), *self.shares.shape[1:2] * 2))
        if not uneven.all():
            local[~uneven] = self._even({ab: c[~uneven, 0] for ab, c in coefficients.items()})
        if uneven.any():
            local[uneven] = self._uneven({ab: c[uneven] for ab, c in coefficients.items()})
        return local

    def _even(self, coefficients: Coefficients) -> Floats:
        """The same for numbers (n,) that are the same all over a triangle."""
        means = np.stack([self._mean(*pair) for pair in coefficients])
        return np.tensordot(np.stack(list(coefficients.values()), axis=1), means, axes=1)

    def _mean(self, a: int, b: int) -> Floats:
        if (a, b) not in self._means:
            half = (self.shares[a] * self.weights) @ self.shares[b].T
            self._means[a, b] = half if a == b else half + half.T
        return self._means[a, b]

    def _uneven(self, coefficients: Coefficients) -> Floats:
        """The sum of S_a c_ab S_b over a, b and the points: for each a one product of matrices."""
        size, points = self.shares.shape[1:]
        count = len(next(iter(coefficients.values())))
        local = np.zeros((count * size, size))
        for a in {a for pair in coefficients for a in pair}:
            left = sum(
                (c * self.weights)[:, None] * self.shares[pair[1 - pair.index(a)]]
                for pair, c in coefficients.items()
                if a in pair
            )
            local += np.reshape(left, (-1, points)) @ self.shares[a].T
        return local.reshape(count, size, size)


def _uneven(coefficient: Floats) -> Any:
    largest = np.abs(coefficient).max(axis=1)
    return np.abs(coefficient - coefficient[:, :1]).max(axis=1) > CONSTANT * largest
