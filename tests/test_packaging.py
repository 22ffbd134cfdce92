"""What is installed: a wheel holds every file it should, and every version is pinned."""

from __future__ import annotations

import re
import shutil
import subprocess
import sys
import tomllib
from pathlib import Path
from zipfile import ZipFile

import pytest

ROOT = Path(__file__).parents[1]
PROJECT = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))["project"]
INSTALLED_AS = {"membrane": "membrane", "geometries": "membrane/geometries"}
SUFFIXES = {".py", ".json", ".txt", ".typed"}


def names_to_install() -> set[str]:
    """Where each file of the two folders must stand in a wheel."""
    return {
        f"{target}/{path.relative_to(ROOT / folder).as_posix()}"
        for folder, target in INSTALLED_AS.items()
        for path in (ROOT / folder).rglob("*")
        if path.suffix in SUFFIXES
    }


@pytest.fixture
def wheel(tmp_path: Path) -> Path:
    """A wheel built from a copy of the sources, with nothing downloaded."""
    source = tmp_path / "source"
    for folder in INSTALLED_AS:
        shutil.copytree(ROOT / folder, source / folder)
    for name in ("pyproject.toml", "README.md", "LICENSE"):
        shutil.copy(ROOT / name, source)
    options = ["--quiet", "--no-deps", "--no-index", "--no-build-isolation"]
    command = [sys.executable, "-m", "pip", "wheel", *options, "--wheel-dir", str(tmp_path)]
    subprocess.run([*command, str(source)], check=True)
    (built,) = tmp_path.glob("*.whl")
    return built


@pytest.mark.slow
def test_a_wheel_holds_both_folders_and_the_licence(wheel: Path) -> None:
    held = set(ZipFile(wheel).namelist())
    assert "membrane/geometries/py.typed" in names_to_install()
    assert names_to_install() - held == set()
    assert any(name.endswith("/licenses/LICENSE") for name in held)
    assert not any("__pycache__" in name for name in held)


@pytest.mark.slow
def test_an_installed_wheel_finds_its_geometry_scripts(wheel: Path, tmp_path: Path) -> None:
    ZipFile(wheel).extractall(tmp_path / "target")
    code = "import membrane.geometries as g; print(g.__file__)"
    command = [sys.executable, "-c", code]
    found = subprocess.run(
        command, check=True, capture_output=True, text=True, cwd=tmp_path / "target"
    )
    assert Path(found.stdout.strip()).is_relative_to(tmp_path / "target")


def pins() -> dict[str, str]:
    """Name -> version of each line of the constraints file."""
    text = (ROOT / "scripts" / "constraints.txt").read_text(encoding="utf-8")
    lines = [line for line in text.splitlines() if line and not line.startswith("#")]
    return {normal(name): version for name, version in (line.split("==") for line in lines)}


def normal(name: str) -> str:
    """A distribution's name as the Python packaging standards compare it."""
    return re.sub(r"[-_.]+", "-", name).lower()


def test_each_requirement_is_pinned() -> None:
    extras = PROJECT["optional-dependencies"].values()
    wanted = [*PROJECT["dependencies"], *(line for extra in extras for line in extra)]
    names = {normal(re.match(r"[\w.-]+", line).group()) for line in wanted}
    assert names - set(pins()) == set()


def test_a_pin_is_a_bare_version() -> None:
    assert [v for v in pins().values() if not re.fullmatch(r"[0-9][\w.]*", v)] == []
