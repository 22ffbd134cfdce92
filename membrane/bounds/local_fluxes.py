"""The fluxes of each triangle by itself: the local half of ``membrane.bounds.fluxes``."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from membrane.bounds.flux_matrices import (
    compliances,
    divergence_matrix,
    driving_products,
    load_products,
    spreads,
)
from membrane.bounds.head import Head
from membrane.bounds.pieces import Piece, pieces
from membrane.records.arrays import Floats, Ints
from membrane.records.pencil import Space


@dataclass(frozen=True)
class Sources:
    """What drives the fluxes.

    vectors : (n_dofs, n), the functions u
    values : (n,), about their eigenvalues
    gamma : the shift
    """

    space: Space
    vectors: Floats
    values: Floats
    gamma: float


@dataclass(frozen=True)
class LocalFluxes:
    """Some triangles, each solved by itself.

    triangles : (m,)
    driven : (m, i, n), the fluxes with no multipliers
    answers : (m, i, 3k), the fluxes for a unit of each multiplier
    """

    triangles: Ints
    driven: Floats
    answers: Floats


def local_fluxes(head: Head, sources: Sources, degree: int) -> Iterator[LocalFluxes]:
    """The fluxes of a degree, some triangles at a time."""
    for whole in pieces(head, 2 * degree, extra=0):
        for piece in whole.parts(10 * degree**2):
            spread = spreads(piece, degree)
            system = _system(head, piece, sources.gamma, spread, degree)
            right = _right(head, piece, sources, spread, degree)
            found = np.asarray(np.linalg.solve(system, right)[:, : degree * (degree + 2)])
            yield LocalFluxes(piece.triangles, found[:, :, 3 * degree :], found[:, :, : 3 * degree])


def _system(head: Head, piece: Piece, gamma: float, spread: Floats, degree: int) -> Floats:
    """(m, i + j, i + j): fluxes first, of which 3k across the sides, then p."""
    divergence = divergence_matrix(degree)
    inner, fluxes = divergence.shape
    k = (gamma * head.density + head.bedding)[piece.triangles, None, None]
    system = np.zeros((piece.triangles.size, fluxes + inner, fluxes + inner))
    system[:, :fluxes, :fluxes] = compliances(head, piece, degree)
    system[:, fluxes:, :fluxes] = divergence
    system[:, :fluxes, fluxes:] = divergence.T
    system[:, fluxes:, fluxes:] = -k * spread
    return system


def _right(head: Head, piece: Piece, sources: Sources, spread: Floats, degree: int) -> Floats:
    """(m, i + j, 3k + n): a unit of each multiplier, then what each function drives."""
    some, sides, fluxes = piece.triangles, 3 * degree, degree * (degree + 2)
    functions = sources.vectors[sources.space.element_dofs[:, some]]
    slopes = _applied(driving_products(degree, sources.space.degree), functions)
    loads = _applied(load_products(degree, sources.space.degree), functions)
    c = 1 / (sources.values + sources.gamma)
    rho, kappa = (each[some, None, None] for each in (head.density, head.bedding))
    missing = rho - c * (sources.gamma * rho + kappa)
    right = np.zeros((some.size, fluxes + loads.shape[1], sides + c.size))
    right[:, :sides, :sides] = np.eye(sides)
    right[:, :fluxes, sides:] = c * slopes
    right[:, fluxes:, sides:] = -missing * (spread @ loads)
    right[:, :, sides:] *= head.turning[some, None, None]
    return right


def _applied(matrix: Floats, functions: Floats) -> Floats:
    """(m, i, n): a matrix (i, j) times local functions (j, m, n)."""
    return np.asarray(np.swapaxes(np.tensordot(matrix, functions, axes=1), 0, 1))
