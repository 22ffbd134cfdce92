"""From a study file or plain data to a Study, with every problem found in one error."""

from __future__ import annotations

import tomllib
from collections.abc import Mapping
from dataclasses import replace
from pathlib import Path
from typing import Any

from membrane.errors import Problem, StudyError
from membrane.records.study import Study
from membrane.study.paths import located
from membrane.study.probe import Probe
from membrane.study.problems import Problems
from membrane.study.sections import SWEEP, read_sections
from membrane.study.sweep import read_sweep
from membrane.study.table import Table


def read_study(path: Path | str) -> Study:
    """The study in a TOML file.

    Raises StudyError with all problems of the file.
    """
    file = Path(path)
    return study_from(_toml(file), file.parent)


def study_from(keys: Mapping[str, Any], base: Path | str = ".") -> Study:
    """The study in plain data with the study file's keys.

    base : the folder that the paths of scripts and CSV files start from
    Raises StudyError with all problems.
    """
    root = Table(located(keys, Path(base)), "", Problems())
    study = read_sections(root, Path(base))
    root.problems.raise_any()
    assert study is not None, "a study without a problem is read whole"
    return _with_sweep(study, root, Path(base)) if SWEEP in root.keys else study


def _with_sweep(study: Study, root: Table, base: Path) -> Study:
    """The same study with its sweep. Raises StudyError with the sweep's problems."""
    probe = Probe(dict(study.source), lambda keys: _resolved(keys, base))
    table = root.table(SWEEP)
    sweep = None if table is None else read_sweep(table, probe, base)
    root.problems.raise_any()
    return replace(study, sweep=sweep)


def _resolved(keys: Mapping[str, Any], base: Path) -> tuple[dict[str, Any], tuple[Problem, ...]]:
    """The study's plain data in SI numbers, as far as it is sound, and what is wrong."""
    root = Table(keys, "", Problems())
    read_sections(root, base)
    return root.resolved, tuple(root.problems.found)


def _toml(file: Path) -> dict[str, Any]:
    try:
        return tomllib.loads(file.read_bytes().decode("utf-8-sig"))
    except FileNotFoundError:
        raise StudyError("there is no such file; check the path of the study.") from None
    except OSError as failure:
        raise StudyError(f"the study cannot be read: {failure.strerror}.") from failure
    except UnicodeDecodeError as failure:
        raise StudyError("the study is not UTF-8 text; save it as UTF-8.") from failure
    except tomllib.TOMLDecodeError as failure:
        reason = str(failure)[:1].lower() + str(failure)[1:]
        raise StudyError(f"the study is not valid TOML: {reason}.") from failure
