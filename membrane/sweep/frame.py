"""The rows of points.csv as a pandas DataFrame, and as a Parquet file."""

from __future__ import annotations

import os
from pathlib import Path
from typing import Any

import numpy as np

from membrane.errors import OutputError
from membrane.sweep.results import SweepResults

PARQUET = "points.parquet"
_REMEDY = 'please install them: pip install "membrane[table]".'


def frame(results: SweepResults) -> Any:
    """One row for each mode of each point. Raises OutputError where pandas is missing."""
    try:
        import pandas
    except ImportError:
        raise OutputError(f"a DataFrame needs pandas, Parquet pyarrow too; {_REMEDY}") from None
    modes = results.frequencies.shape[1]
    columns: dict[str, Any] = {"point": np.repeat(results.numbers, modes)}
    columns |= {key: np.repeat(values, modes) for key, values in results.axes.items()}
    columns["mode"] = np.tile(np.arange(1, modes + 1), len(results.numbers))
    columns["frequency_hz"] = results.frequencies.ravel()
    columns["error_cents"] = results.error_cents.ravel()
    branches = results.branches.ravel()
    columns["branch"] = pandas.arrays.IntegerArray(branches, branches == 0)
    columns["kind_of_error"] = pandas.Categorical(np.repeat(np.array(results.kinds), modes))
    rows = pandas.DataFrame(columns)
    return rows[rows["frequency_hz"].notna()].reset_index(drop=True)


def write_parquet(results: SweepResults, folder: Path) -> None:
    """Write points.parquet. Raises OutputError where that cannot be done."""
    rows = frame(results)
    partial = folder / f"{PARQUET}.partial"
    try:
        rows.to_parquet(partial, index=False)
        os.replace(partial, folder / PARQUET)
    except ImportError:
        raise OutputError(f"Parquet needs pyarrow beside pandas; {_REMEDY}") from None
    except OSError as failure:
        raise OutputError(f"{folder / PARQUET} cannot be written: {failure}.") from failure
