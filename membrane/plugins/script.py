"""Outline plugins that are a script of the user's, named by its path."""

from __future__ import annotations

import sys
from functools import lru_cache
from hashlib import sha256
from importlib.util import module_from_spec, spec_from_file_location
from pathlib import Path
from types import ModuleType

from membrane.errors import PluginError


def is_script(name: str) -> bool:
    """Whether an outline is named by the path of a script."""
    return name.endswith(".py")


def load_script(path: str) -> ModuleType:
    """Run a script and keep its module until the file changes.

    Raises PluginError where there is no such file or it fails.
    """
    file = Path(path)
    if not file.is_file():
        raise PluginError(f"There is no outline script {file}.")
    return _load(file.resolve(), file.stat().st_mtime_ns)


@lru_cache(maxsize=32)
def _load(file: Path, changed: int) -> ModuleType:
    # A private name, so that a script called math.py shadows nothing.
    name = f"_membrane_outline_{sha256(str(file).encode()).hexdigest()[:16]}_{changed}"
    spec = spec_from_file_location(name, file)
    if spec is None or spec.loader is None:
        raise PluginError(f"The outline script {file} cannot be read as Python.")
    module = module_from_spec(spec)
    sys.modules[name] = module  # dataclasses look their module up while it runs
    try:
        spec.loader.exec_module(module)
    except Exception as failure:  # a user's script may raise anything at all
        del sys.modules[name]
        raise PluginError(
            f"The outline script {file} fails ({type(failure).__name__}: {failure}); repair it."
        ) from failure
    return module
