"""A folded, incomplete or untagged mesh is refused."""

from dataclasses import replace

import numpy as np
import pytest

from membrane.errors import MeshError
from membrane.mesh.checks import check_mesh, jacobians
from membrane.mesh.corner import Fan
from tests import zoo


@pytest.fixture(scope="module")
def disc():
    return zoo.prepared(zoo.DISC)


def test_a_good_mesh_passes(disc):
    check_mesh(disc.mesh, disc.outline)
    assert jacobians(disc.mesh).min() > 0


def test_folded(disc):
    nodes = disc.mesh.nodes.copy()
    nodes[:, -1, 0] += 10 * np.ptp(nodes[:, :, 0])
    with pytest.raises(MeshError, match="folds"):
        check_mesh(replace(disc.mesh, nodes=nodes), disc.outline)


def test_a_triangle_may_come_to_nothing_at_the_corner_of_its_fan_alone():
    corner = zoo.prepared(zoo.L_SHAPE)
    fan = Fan(np.zeros(2), 3)
    check_mesh(corner.mesh, corner.outline, (fan,))
    for others in ((), (replace(fan, place=np.ones(2)),)):
        with pytest.raises(MeshError, match="folds"):
            check_mesh(corner.mesh, corner.outline, others)


def test_a_folded_fan():
    corner = zoo.prepared(zoo.L_SHAPE)
    triangle = int(np.nonzero((corner.mesh.vertices == 0).all(axis=0)[corner.mesh.triangles])[1][0])
    nodes = corner.mesh.nodes.copy()
    nodes[:, -1, triangle] += np.ptp(nodes[:, :, triangle])
    with pytest.raises(MeshError, match="folds"):
        check_mesh(replace(corner.mesh, nodes=nodes), corner.outline, (Fan(np.zeros(2), 3),))


def test_hole_in_the_mesh(disc):
    mesh = disc.mesh
    fewer = replace(
        mesh, triangles=mesh.triangles[:, 1:], nodes=mesh.nodes[:, :, 1:], region=mesh.region[1:]
    )
    with pytest.raises(MeshError, match='region "head" is covered by'):
        check_mesh(fewer, disc.outline)


def test_edge_without_sides(disc):
    empty = replace(disc.mesh, edges={"rim": np.empty((2, 0), dtype=np.int64)})
    with pytest.raises(MeshError, match='edge "rim" has no sides'):
        check_mesh(empty, disc.outline)


def test_triangle_without_region(disc):
    lost = replace(disc.mesh, region=disc.mesh.region - 1)
    with pytest.raises(MeshError, match="no region"):
        check_mesh(lost, disc.outline)
