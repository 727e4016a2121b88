"""Run by ParaView's own interpreter (pvpython or pvbatch): paraview_arrays.py RUN...

Opens fields.pvd and walls.pvd of each run as a user does, steps through the times that ParaView offers, slices the
fields along a circle with ParaView's slice filter, and stores what it got as RUN.npz for viewer_runs.py.
"""

import os
import sys
import tomllib

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))

import numpy as np
from paraview import servermanager, simple

import vtk_arrays


def slice_of(reader, box, radius):
    """A plane in the box; elsewhere a ball about the middle, which cuts the picture's plane in a circle."""
    kind = "Plane" if box else "Sphere"
    slice_filter = simple.Slice(Input=reader, SliceType=kind)
    if box:
        slice_filter.SliceType.Origin, slice_filter.SliceType.Normal = [0, radius, 0], [0, 1, 0]
    else:
        slice_filter.SliceType.Center, slice_filter.SliceType.Radius = [0, 0, 0], radius
    return slice_filter


def said_ranges(reader, state):
    """The extremes that ParaView's own information panel shows."""
    for information in (reader.CellData, reader.PointData):
        for k in range(information.GetNumberOfArrays()):
            array = information.GetArray(k)
            if array.GetNumberOfComponents() == 1:
                state["range." + array.GetName()] = np.array(array.GetRange())


def states(path, box, radial):
    reader = simple.PVDReader(FileName=path)
    times = list(reader.TimestepValues)
    for time in times:
        reader.UpdatePipeline(time)
        state = vtk_arrays.state_of(servermanager.Fetch(reader), time)
        said_ranges(reader, state)
        if radial:
            cut = slice_of(reader, box, vtk_arrays.middle_row(state, radial))
            cut.UpdatePipeline(time)
            state.update(vtk_arrays.cut_of(servermanager.Fetch(cut)))
            simple.Delete(cut)
        yield state
    simple.Delete(reader)


def grid_of(run):
    """Box or not, and rows of cells."""
    with open(os.path.join(run, "case_as_read.toml"), "rb") as file:
        case = tomllib.load(file)
    return case["shell"]["geometry"] == "box", case["grid"]["radial"]


def store(run):
    box, radial = grid_of(run)
    flat = {}
    for kind, rows in (("fields", radial), ("walls", None)):
        for n, state in enumerate(states(os.path.join(run, kind + ".pvd"), box, rows)):
            flat.update({f"{kind}|{n}|{name}": values for name, values in state.items()})
    np.savez(run + ".npz", **flat)
    print(f"{os.path.basename(run)}: opened, {len(flat)} arrays", flush=True)


print(f"ParaView {servermanager.vtkSMProxyManager.GetParaViewSourceVersion()}", flush=True)
for folder in sys.argv[1:]:
    store(folder)
