"""The picture is drawn, in colour, with every mode on it."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from matplotlib.image import imread

from membrane.products import pictures
from membrane.products.pictures import Options
from membrane.records.spectrum import Spectrum


def test_every_mode_is_on_the_picture_in_red_and_blue(patched: Spectrum, tmp_path: Path) -> None:
    pictures.write(patched, tmp_path, Options())
    red, green, blue = np.moveaxis(imread(tmp_path / "modes.png")[..., :3], -1, 0)
    assert min(red.shape) > 400
    assert (red - blue > 0.3).mean() > 0.02
    assert (blue - red > 0.3).mean() > 0.02
    assert ((red == green) & (green == blue) & (red < 0.2)).mean() > 0.001  # ink


def test_colours_are_where_the_mode_moves(free: Spectrum, tmp_path: Path) -> None:
    rigid, tilted = free.partials[:2]
    pictures.write(free, tmp_path, Options())
    image = imread(tmp_path / "modes.png")[..., :3]
    coloured = np.abs(image[..., 0] - image[..., 2]) > 0.3
    columns = np.nonzero(coloured.any(axis=0))[0]
    assert columns.max() - columns.min() > 0.5 * image.shape[1]
    assert (rigid.nodal.domains, tilted.nodal.domains) == (1, 2)


@pytest.mark.parametrize(("kind", "start"), [("svg", b"<?xml"), ("pdf", b"%PDF")])
def test_other_formats(free: Spectrum, tmp_path: Path, kind: str, start: bytes) -> None:
    pictures.write(free, tmp_path, Options(format=kind, dpi=50))
    assert (tmp_path / f"modes.{kind}").read_bytes().startswith(start)
    assert not (tmp_path / "modes.png").exists()


def test_dots_per_inch_set_the_size(free: Spectrum, tmp_path: Path) -> None:
    sizes = []
    for dpi in (50, 100):
        pictures.write(free, tmp_path, Options(dpi=dpi))
        sizes.append(np.array(imread(tmp_path / "modes.png").shape[:2]))
    np.testing.assert_allclose(sizes[1], 2 * sizes[0], atol=2)
