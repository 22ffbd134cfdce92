"""Which mode continues which, on vectors whose overlaps are known."""

import numpy as np
import pytest

from membrane.branches.shapes import Shapes, overlaps, turned_onto
from membrane.branches.step import step

OLD = Shapes(np.array([1.0, 2.0]), np.eye(6)[:, :2], np.eye(6))


def seen(*shares):
    """One new mode for each share of the second old one that it holds; the rest is new."""
    vectors = np.zeros((6, len(shares)))
    vectors[1] = np.sqrt(shares)
    for i, share in enumerate(shares):
        vectors[2 + i, i] = np.sqrt(1.0 - share)
    return Shapes(np.arange(3.0, 3.0 + len(shares)), vectors, np.eye(6))


def test_a_mode_that_the_new_ones_hold_together_goes_on():
    assert step(OLD, seen(0.25, 0.7), 1e-4).partner.tolist() == [-1, 1]


def test_a_mode_that_has_left_them_is_lost_though_one_is_like_it():
    assert step(OLD, seen(0.0, 0.7), 1e-4).partner.tolist() == [-1, -1]


def test_a_mode_in_many_pieces_is_lost():
    assert step(OLD, seen(0.4, 0.3, 0.25), 1e-4).partner.tolist() == [-1, -1]


@pytest.mark.parametrize("angle", [0.3, np.pi / 4, 2.0])
def test_a_cluster_is_turned_onto_the_old_modes(angle):
    turn = np.array([[np.cos(angle), -np.sin(angle)], [np.sin(angle), np.cos(angle)]])
    new = Shapes(np.array([2.0, 2.0]), OLD.vectors @ turn, OLD.mass)
    np.testing.assert_allclose(overlaps(OLD, turned_onto(OLD, new, 1e-4)), np.eye(2), atol=1e-14)


def test_overlaps_do_not_depend_on_the_vectors_lengths():
    long = Shapes(OLD.eigenvalues, 3.0 * OLD.vectors, 2.0 * OLD.mass)
    np.testing.assert_allclose(overlaps(OLD, long), np.eye(2), atol=1e-14)
