"""A function of the user's own in a Python script that the study names."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np

from membrane.errors import PluginError
from membrane.plugins.script import load_script
from membrane.records.arrays import Floats
from membrane.records.function import Rule
from membrane.wording import listed, nearest, shown


def from_script(file: Path, name: str) -> Rule:
    """The script's function ``name(x, y)``, which takes and gives arrays (n,), x and y in metres.

    Raises ValueError with a sentence where there is no such script or function.
    """
    try:
        module = load_script(str(file))
    except PluginError as failure:
        raise ValueError(str(failure)) from failure
    function = getattr(module, name, None)
    if not callable(function):
        known = [key for key, value in vars(module).items() if _is_own(module, key, value)]
        hint = nearest(name, known)
        named = hint if hint != "." else f"; its functions are {listed(known)}."
        raise ValueError(f"{file} has no function {shown(name)}{named}")

    def rule(x: Floats, y: Floats) -> Floats:
        try:
            return np.array(np.broadcast_to(np.asarray(function(x, y), dtype=float), x.shape))
        except Exception as failure:  # a user's function may raise anything at all
            raise PluginError(
                f"The function {name} of {file} fails ({type(failure).__name__}: {failure}); "
                "it must take two arrays x and y and give an array of the same shape."
            ) from failure

    return rule


def _is_own(module: Any, key: str, value: Any) -> bool:
    return callable(value) and getattr(value, "__module__", "") == module.__name__ and key[0] != "_"
