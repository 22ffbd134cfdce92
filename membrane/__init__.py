"""Modes of drum heads and other tensioned membranes, from a study to what is heard."""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from membrane.errors import MembraneError
    from membrane.pipeline import run, write
    from membrane.records.spectrum import Spectrum
    from membrane.records.study import Study
    from membrane.study import read_study, study_from

    __version__: str

# Loaded on first use, so that `import membrane` stays light.
_HOMES = {
    "MembraneError": "membrane.errors",
    "Spectrum": "membrane.records.spectrum",
    "Study": "membrane.records.study",
    "read_study": "membrane.study",
    "run": "membrane.pipeline",
    "study_from": "membrane.study",
    "write": "membrane.pipeline",
}

__all__ = [
    "MembraneError",
    "Spectrum",
    "Study",
    "__version__",
    "read_study",
    "run",
    "study_from",
    "write",
]


def __getattr__(name: str) -> Any:
    if name == "__version__":
        from importlib.metadata import version

        return version("membrane")
    if name not in _HOMES:
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    return getattr(import_module(_HOMES[name]), name)


def __dir__() -> list[str]:
    return __all__
