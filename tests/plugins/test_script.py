"""An outline script is loaded by its path, under a private name, and again when it changes."""

from __future__ import annotations

import os
import sys

import pytest

from membrane import plugins
from membrane.errors import PluginError

SCRIPT = '''
"""A drawing."""
from __future__ import annotations
from dataclasses import dataclass
WORD = "{word}"

@dataclass(frozen=True)
class Options:
    size: float = 1.0

def edges(options): return ("rim",)
def build(geometry, options): ...
'''


def test_a_script_by_its_path(tmp_path):
    script = tmp_path / "json.py"
    script.write_text(SCRIPT.format(word="one"))
    module = plugins.load("outline", str(script))
    assert module.WORD == "one"
    assert plugins.load("outline", str(script)) is module
    assert sys.modules["json"] is not module


def test_a_changed_script_is_loaded_again(tmp_path):
    script = tmp_path / "mine.py"
    script.write_text(SCRIPT.format(word="one"))
    assert plugins.load("outline", str(script)).WORD == "one"
    script.write_text(SCRIPT.format(word="two"))
    os.utime(script, ns=(1, 1))
    assert plugins.load("outline", str(script)).WORD == "two"


def test_a_script_that_is_not_there(tmp_path):
    with pytest.raises(PluginError, match=r"There is no outline script .*mine\.py\."):
        plugins.load("outline", str(tmp_path / "mine.py"))


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("1 / 0", r"fails \(ZeroDivisionError: division by zero\); repair it"),
        ("def", r"fails \(SyntaxError"),
        ("x = 1", r"lacks Options and edges and build"),
    ],
)
def test_a_broken_script(tmp_path, text, said):
    script = tmp_path / "mine.py"
    script.write_text(text)
    with pytest.raises(PluginError, match=said):
        plugins.load("outline", str(script))
