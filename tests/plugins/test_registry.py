"""Plugins are found by name, imported on use, and told apart when two claim one name."""

from __future__ import annotations

import subprocess
import sys
from importlib.metadata import EntryPoint
from pathlib import Path

import pytest

import membrane.geometries
from membrane import plugins
from membrane.errors import PluginError
from membrane.plugins import registry


class _Dist:
    def __init__(self, name: str) -> None:
        self.name = name


def declare(monkeypatch, package: str, **entries: str) -> None:
    """Let ``package`` declare outlines, name=target, as if it were installed."""
    points = [EntryPoint(name, value, "membrane.outlines") for name, value in entries.items()]
    for point in points:
        vars(point)["dist"] = _Dist(package)
    monkeypatch.setattr(
        registry, "entry_points", lambda group: points if group == "membrane.outlines" else []
    )
    registry.registered.cache_clear()


@pytest.fixture(autouse=True)
def _fresh_registry():
    yield
    registry.registered.cache_clear()


@pytest.mark.parametrize("kind", plugins.GROUPS)
def test_our_own_plugins_are_listed_and_described(kind):
    assert plugins.names(kind)
    for name in plugins.names(kind):
        assert plugins.describe(kind, name).endswith(".")


def test_every_own_plugin_can_be_loaded():
    for kind in plugins.GROUPS:
        for name in plugins.names(kind):
            module = plugins.load(kind, name)
            assert plugins.load(kind, name) is module
            first = (module.__doc__ or "").splitlines()[0]
            assert first == plugins.describe(kind, name)


def test_every_geometry_script_is_registered():
    files = Path(membrane.geometries.__path__[0]).glob("[!_]*.py")
    targets = {plugin.target for plugin in plugins.registered("outline").values()}
    assert {f"membrane.geometries.{file.stem}" for file in files} == targets


def test_the_view_is_read_only():
    with pytest.raises(TypeError):
        plugins.registered("outline")["mine"] = None


def test_an_unknown_name_is_answered_with_the_known_ones():
    with pytest.raises(PluginError, match=r'no outline "disk"; did you mean "disc"\?'):
        plugins.load("outline", "disk")
    with pytest.raises(PluginError, match=r"known are tension, areal_density"):
        plugins.find("term", "zebra")


def test_two_packages_with_one_name(monkeypatch):
    declare(monkeypatch, "drum-kit", disc="drum_kit.disc")
    with pytest.raises(PluginError) as caught:
        plugins.load("outline", "disc")
    assert '"disc" is claimed by both membrane' in str(caught.value)
    assert "drum-kit (drum_kit.disc)" in str(caught.value)


def test_one_package_found_twice_is_no_clash(monkeypatch):
    point = EntryPoint("egg", "drum_kit.egg", "membrane.outlines")
    vars(point)["dist"] = _Dist("drum-kit")
    monkeypatch.setattr(registry, "entry_points", lambda group: [point, point])
    registry.registered.cache_clear()
    assert plugins.package_of("outline", "egg") == "drum-kit"


def test_listing_imports_nothing(monkeypatch):
    declare(monkeypatch, "drum-kit", egg="module_that_is_not_there.egg")
    assert "egg" in plugins.names("outline")
    assert plugins.describe("outline", "egg") == "(cannot be read)"


def test_a_plugin_that_cannot_be_imported(monkeypatch):
    declare(monkeypatch, "drum-kit", egg="module_that_is_not_there.egg")
    with pytest.raises(PluginError, match=r'"egg" of drum-kit cannot be imported \(Module'):
        plugins.load("outline", "egg")


def test_a_plugin_that_raises_when_imported(monkeypatch, tmp_path):
    (tmp_path / "broken_egg.py").write_text("1 / 0\n")
    monkeypatch.syspath_prepend(tmp_path)
    declare(monkeypatch, "drum-kit", egg="broken_egg")
    with pytest.raises(PluginError, match=r"ZeroDivisionError: division by zero"):
        plugins.load("outline", "egg")


def test_a_plugin_that_lacks_a_part(monkeypatch):
    declare(monkeypatch, "drum-kit", egg="json")
    with pytest.raises(PluginError, match='"egg" lacks Options and edges and build'):
        plugins.load("outline", "egg")


def test_listing_loads_no_plugin():
    code = (
        "import sys; from membrane import plugins\n"
        "for kind in plugins.GROUPS:\n"
        "    for name in plugins.names(kind): plugins.describe(kind, name)\n"
        "loaded = [p.target for kind in plugins.GROUPS\n"
        "          for p in plugins.registered(kind).values() if p.target in sys.modules]\n"
        "assert not loaded, loaded\n"
    )
    subprocess.run([sys.executable, "-c", code], check=True)
