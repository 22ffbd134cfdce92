"""Drawings and meshes that tests write for themselves."""

from pathlib import Path

import pytest

FILES = Path(__file__).parent / "files"

PAGE = '<svg xmlns="http://www.w3.org/2000/svg" {}>{}</svg>'
MM = 'width="100mm" height="80mm" viewBox="0 0 100 80"'


@pytest.fixture
def files():
    """Files made with other programs: ezdxf, svgwrite, gmsh and meshio; one by hand."""
    return FILES


@pytest.fixture
def dxf(tmp_path):
    """A function: from one that draws in ezdxf's model space to the file."""
    ezdxf = pytest.importorskip("ezdxf")

    def write(draw, units=4, name="drawing.dxf"):
        document = ezdxf.new(units=units)
        draw(document.modelspace())
        document.saveas(tmp_path / name)
        return tmp_path / name

    return write


@pytest.fixture
def svg(tmp_path):
    """A function: from what stands inside the svg element to the file."""

    def write(body, page=MM, name="drawing.svg"):
        (tmp_path / name).write_text(PAGE.format(page, body), encoding="utf-8")
        return tmp_path / name

    return write


@pytest.fixture
def mesh(tmp_path):
    """A function: from points and cells to a mesh file."""
    meshio = pytest.importorskip("meshio")

    def write(points, cells, name="mesh.vtk", **more):
        meshio.Mesh(points, cells, **more).write(tmp_path / name)
        return tmp_path / name

    return write
