"""Who imports what: stages stay apart, heavy packages have one owner, the start is light."""

from __future__ import annotations

import ast
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

import membrane

PACKAGE = Path(membrane.__file__).parent
FILES = sorted(PACKAGE.rglob("*.py"))
GEOMETRIES = sorted((PACKAGE.parent / "geometries").glob("*.py"))

OWNERS = {
    "gmsh": ("kernel",),
    "pygmsh": ("kernel",),
    "skfem": ("pencil",),
    "cvxopt": ("cholesky",),
    "meshio": ("products.vtu", "drawings.mesh_file"),
    "matplotlib": ("products.pictures", "products.branch_picture"),
    "distributed": ("sweep.cluster",),
    "dask": ("sweep.cluster",),
    "pandas": ("sweep.frame",),
    "ezdxf": ("drawings.dxf",),
    "svgelements": ("drawings.svg",),
}
"""Heavy package -> the modules or folders of modules, below membrane, that own it."""

STAGES = (
    *("study", "outline", "coefficients", "mesh", "pencil", "modes", "bounds", "accuracy"),
    *("nodal", "partials", "products", "terms", "reduced", "branches"),
)
"""Rooms that know nothing of each other; only the pipeline knows their order."""

MAY_KNOW_STAGES = ("pipeline", "cli", "__init__", "__main__", "sweep.solving")
HEAVY = (*OWNERS, "scipy", "pydantic", "pint", "numpy")


def module_of(file: Path) -> str:
    """``mesh.make`` for membrane/mesh/make.py, ``mesh`` for membrane/mesh/__init__.py."""
    parts = file.relative_to(PACKAGE).with_suffix("").parts
    return ".".join(parts[:-1] if parts[-1] == "__init__" and len(parts) > 1 else parts)


def imports(file: Path) -> Iterator[str]:
    """Dotted names that a file imports, at its top or anywhere in it."""
    for node in ast.walk(ast.parse(file.read_text())):
        if isinstance(node, ast.Import):
            yield from (alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{file} has a relative import"
            yield from (f"{node.module}.{alias.name}" for alias in node.names)


def within(name: str, room: str) -> bool:
    return name == room or name.startswith(f"{room}.")


def room_of(module: str) -> str | None:
    return next((stage for stage in STAGES if within(module, stage)), None)


def test_there_is_something_to_read():
    assert len(FILES) > 40
    assert {room_of(module_of(file)) for file in FILES} >= set(STAGES) - {"products"}
    assert any(name.startswith("gmsh") for file in FILES for name in imports(file))


@pytest.mark.parametrize("file", FILES, ids=module_of)
def test_heavy_packages_have_one_owner(file):
    for name in imports(file):
        package = name.split(".")[0]
        if package in OWNERS:
            owners = OWNERS[package]
            owned = any(within(module_of(file), owner) for owner in owners)
            assert owned, f"{name} has another owner"


@pytest.mark.parametrize("file", FILES, ids=module_of)
def test_stages_do_not_import_each_other(file):
    module = module_of(file)
    if any(within(module, known) for known in MAY_KNOW_STAGES):
        return
    for name in imports(file):
        other = room_of(name.removeprefix("membrane.")) if within(name, "membrane") else None
        assert other in (None, room_of(module)), f"{module} imports {name}"


@pytest.mark.parametrize("file", FILES, ids=module_of)
def test_nothing_but_the_commands_knows_the_pipeline(file):
    if any(within(module_of(file), known) for known in MAY_KNOW_STAGES):
        return
    assert not any(within(name, "membrane.pipeline") for name in imports(file))


@pytest.mark.parametrize("file", GEOMETRIES, ids=lambda file: file.stem)
def test_geometry_scripts_need_nothing_but_records_units_and_curves(file):
    services = ("records", "units", "beziers", "crossing", "drawings")
    allowed = tuple(f"membrane.{service}" for service in services)
    for name in imports(file):
        ours = name.startswith("membrane")
        assert any(within(name, one) for one in allowed) if ours else _is_plain_library(name), name


def _is_plain_library(name: str) -> bool:
    return name.split(".")[0] in {*sys.stdlib_module_names, "__future__", "numpy", "scipy"}


@pytest.mark.parametrize(
    "start",
    ["import membrane", "from membrane.cli import main; main()", "import membrane.__main__"],
)
def test_the_start_is_light(start):
    code = (
        "import sys; sys.argv = ['membrane', '--help']\n"
        f"try:\n    {start}\nexcept SystemExit as end:\n    assert not end.code\n"
        f"loaded = sorted(set({HEAVY!r}) & set(sys.modules))\n"
        "assert not loaded, loaded\n"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True)
    assert (done.returncode, done.stderr) == (0, "")


def test_reading_a_study_needs_neither_kernel_nor_solver():
    keys = {
        "outline": {"shape": "disc", "diameter": "1 m"},
        "head": {"areal_density": 1, "tension": 1},
        "products": {"write": []},
    }
    heavy = set(OWNERS) - {"dask"}  # pint loads a little of it wherever it is installed
    code = (
        f"import sys, membrane; membrane.study_from({keys!r})\n"
        f"loaded = sorted({heavy!r} & set(sys.modules))\n"
        "assert not loaded, loaded\n"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True)
    assert (done.returncode, done.stderr) == (0, "")


def test_the_public_names():
    assert sorted(membrane.__all__) == [
        "MembraneError",
        "Spectrum",
        "Study",
        "__version__",
        "read_study",
        "run",
        "study_from",
        "write",
    ]
    for name in membrane.__all__:
        assert getattr(membrane, name) is not None
    assert dir(membrane) == sorted(membrane.__all__)
    with pytest.raises(AttributeError, match="no attribute 'nonsense'"):
        membrane.nonsense  # noqa: B018
