"""Every product of ours keeps the contract of its kind."""

from __future__ import annotations

from pathlib import Path

import pytest

from membrane import plugins
from membrane.plugins.contracts import check_product
from membrane.records.spectrum import Spectrum


@pytest.mark.parametrize(
    "name", ["summary", "modes_csv", "table", "vtu", "nodal_lines", "pictures"]
)
def test_our_products(name: str, patched: Spectrum, free: Spectrum, tmp_path: Path) -> None:
    for number, spectrum in enumerate((patched, free)):
        folder = tmp_path / str(number)
        folder.mkdir()
        check_product(plugins.load("product", name), spectrum, folder)
    assert plugins.describe("product", name).endswith(".")
