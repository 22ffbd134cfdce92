"""The reader that ParaView uses, from the vtk wheel."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
from vtkmodules.util.numpy_support import vtk_to_numpy
from vtkmodules.vtkIOXML import vtkXMLUnstructuredGridReader


def read_grid(path: Path) -> Any:
    """The grid in a VTU file."""
    reader = vtkXMLUnstructuredGridReader()
    reader.SetFileName(str(path))
    reader.Update()
    return reader.GetOutput()


def points_of(grid: Any) -> np.ndarray:
    """(3, n)"""
    return vtk_to_numpy(grid.GetPoints().GetData()).T


def arrays_of(data: Any) -> dict[str, np.ndarray]:
    """Arrays of a grid's point data or cell data by name."""
    return {
        data.GetArrayName(i): vtk_to_numpy(data.GetArray(i))
        for i in range(data.GetNumberOfArrays())
    }
