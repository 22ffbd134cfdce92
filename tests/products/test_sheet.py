"""Heads on a sheet keep apart and stay on the paper, however many there are."""

from __future__ import annotations

import numpy as np
import pytest

from membrane.products.sheet import lay_out


@pytest.mark.parametrize("count", [1, 2, 3, 7, 20, 60])
@pytest.mark.parametrize("size", [(1.0, 1.0), (3.0, 0.5), (0.2, 0.9)])
def test_heads_neither_overlap_nor_leave_the_paper(count: int, size: tuple[float, float]) -> None:
    corners = np.array([[2.0, 2.0 + size[0]], [-5.0, -5.0 + size[1]]])
    sheet = lay_out(corners, count)
    low = corners[:, [0]] + sheet.places
    high = corners[:, [1]] + sheet.places
    assert sheet.places.shape == sheet.titles.shape == (2, count)
    assert (low[0] >= 0.0).all()
    assert (high[0] <= sheet.width).all()
    assert (low[1] >= -sheet.height).all()
    assert (high[1] < sheet.titles[1]).all()
    assert (sheet.titles[1] < sheet.head_line).all()
    for i in range(count):
        for j in range(i):
            apart = np.abs(low[:, i] - low[:, j]) > np.array(size)
            assert apart.any()


def test_a_sheet_of_twenty_discs_lies_flat() -> None:
    sheet = lay_out(np.array([[-1.0, 1.0], [-1.0, 1.0]]), 20)
    assert 1.0 < sheet.inches[0] / sheet.inches[1] < 1.8
    assert sheet.width / sheet.height == pytest.approx(sheet.inches[0] / sheet.inches[1])
