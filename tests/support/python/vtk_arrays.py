"""What a VTK data set holds, as the arrays of viewed.py. Works in Debian's Python and in ParaView's."""

import numpy as np
from vtkmodules.util.numpy_support import vtk_to_numpy


def arrays(attributes):
    return {
        attributes.GetArrayName(k): vtk_to_numpy(attributes.GetArray(k))
        for k in range(attributes.GetNumberOfArrays())
    }


def only_block(data):
    """A viewer may wrap a file's one data set into blocks."""
    while data.IsA("vtkCompositeDataSet"):
        iterator = data.NewIterator()
        iterator.InitTraversal()
        data = iterator.GetCurrentDataObject()
    return data


def segments(data):
    """Numbers of the points of each line, m x 2; a line of more points becomes several."""
    lines = data.GetLines()
    offsets, connectivity = vtk_to_numpy(lines.GetOffsetsArray()), vtk_to_numpy(lines.GetConnectivityArray())
    pairs = [connectivity[k : k + 2] for a, b in zip(offsets, offsets[1:]) for k in range(a, b - 1)]
    return np.array(pairs)


def state_of(data, listed_time):
    data = only_block(data)
    state = {"listed_time": np.float64(listed_time), "time": arrays(data.GetFieldData())["TimeValue"][0]}
    state["points"] = vtk_to_numpy(data.GetPoints().GetData()).copy()
    state["counts"] = np.array([data.GetNumberOfPoints(), data.GetNumberOfCells()])
    for kind, attributes in (("cell", data.GetCellData()), ("point", data.GetPointData())):
        for name, values in arrays(attributes).items():
            state[f"{kind}.{name}"] = values.copy()
            if values.ndim == 1:
                state[f"range.{name}"] = np.array(attributes.GetArray(name).GetRange())
    if data.IsA("vtkPolyData"):
        state["lines"] = segments(data)
    return state


def cut_of(data):
    """A cut along a circle, as three arrays."""
    data = only_block(data)
    pairs = segments(data)
    points, psi = vtk_to_numpy(data.GetPoints().GetData()), arrays(data.GetPointData())["stream_function"]
    return {"cut.points": points[pairs], "cut.psi": psi[pairs], "cut.velocity": arrays(data.GetCellData())["velocity"].copy()}


def middle_row(state, radial):
    """Radius (height) of the middle of the row of cells in mid-mantle: the circle that is cut."""
    first = state["points"][: radial + 1].astype(float)
    inner, outer = first[radial // 2], first[radial // 2 + 1]
    return (np.hypot(*inner[:2]) + np.hypot(*outer[:2])) / 2
