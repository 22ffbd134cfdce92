"""The element of any degree spans the same space as scikit-fem's own."""

import numpy as np
import pytest
from scipy.linalg import eigh
from skfem import Basis, ElementTriP1, ElementTriP2, ElementTriP3, ElementTriP4, MeshTri
from skfem.models.poisson import laplace, mass

from membrane.pencil.element import element


@pytest.mark.parametrize("theirs", [ElementTriP1, ElementTriP2, ElementTriP3, ElementTriP4])
def test_same_eigenvalues_as_scikit_fems_element(theirs):
    mesh = MeshTri().refined(2)
    spectra = []
    for one in (theirs(), element(theirs.maxdeg)):
        basis = Basis(mesh, one, intorder=8)
        K, M = laplace.assemble(basis), mass.assemble(basis)
        inner = basis.complement_dofs(basis.get_dofs())
        spectra.append(eigh(K[inner][:, inner].toarray(), M[inner][:, inner].toarray())[0])
    np.testing.assert_allclose(spectra[1], spectra[0], rtol=1e-11)


@pytest.mark.parametrize("degree", [6, 9])
def test_high_degree_solves_the_square_to_rounding(degree):
    """lambda = pi^2 (m^2 + n^2), elementary."""
    basis = Basis(MeshTri().refined(2), element(degree), intorder=18)
    K, M = laplace.assemble(basis), mass.assemble(basis)
    inner = basis.complement_dofs(basis.get_dofs())
    value = eigh(
        K[inner][:, inner].toarray(), M[inner][:, inner].toarray(), subset_by_index=[0, 0]
    )[0][0]
    assert abs(value / (2 * np.pi**2) - 1) < 1e-9
