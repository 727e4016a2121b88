"""Opens snapshots with VTK's own readers, as a general viewer does, and checks what it shows.

Called by ctest with the path of the program, from the folder of the test programs: lets io_test write samples whose
numbers are known, and the program march for some steps, on 1 and 3 ranks. Exit code 77: Python's VTK is missing.
ParaView's reader gets the same marches: paraview.sh.
"""

import json
import os
import subprocess
import sys
import xml.etree.ElementTree as ElementTree

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

try:
    import numpy as np
    from vtkmodules.vtkCommonDataModel import vtkPlane, vtkSphere
    from vtkmodules.vtkFiltersCore import vtkCutter
    from vtkmodules.vtkIOXML import vtkXMLPolyDataReader, vtkXMLPStructuredGridReader
except ImportError as error:
    runs.skip(f"{error} (packages python3-vtk9, python3-numpy)")

import viewed
import viewer_runs
import vtk_arrays

SHAPES = (viewed.BOX, viewed.ANNULUS, viewed.SPHERICAL_ANNULUS, viewed.SHELL)  # mesh/geometry.hpp
READERS = {"fields": vtkXMLPStructuredGridReader, "walls": vtkXMLPolyDataReader}


def read(kind, path):
    reader = READERS[kind]()
    reader.SetFileName(path)
    reader.Update()
    assert reader.GetErrorCode() == 0, path
    return reader.GetOutput()


def collection(path):
    entries = ElementTree.parse(path).getroot().iter("DataSet")
    folder = os.path.dirname(path)
    return [(float(e.get("timestep")), os.path.join(folder, e.get("file"))) for e in entries]


def cut(grid, box, radius):
    """By VTK's cutter along a level of the box, or along a circle."""
    surface = vtkPlane() if box else vtkSphere()
    if box:
        surface.SetOrigin(0, radius, 0)
        surface.SetNormal(0, 1, 0)
    else:
        surface.SetRadius(radius)
    cutter = vtkCutter()
    cutter.SetCutFunction(surface)
    cutter.SetInputData(grid)
    cutter.Update()
    return cutter.GetOutput()


def account_of(run):
    """All of a run folder, as viewed.py wants it."""
    account = {}
    for kind in READERS:
        account[kind] = []
        for time, path in collection(os.path.join(run, f"{kind}.pvd")):
            data = read(kind, path)
            account[kind].append(vtk_arrays.state_of(data, time))
            if kind == "fields":
                state = account[kind][-1]
                radius = vtk_arrays.middle_row(state, viewer_runs.radial_cells(run))
                state.update(vtk_arrays.cut_of(cut(data, os.path.basename(run).startswith("box"), radius)))
    return account


# --- samples of io_test, whose every number is known ---------------------------------------------


def check_arrays(picture):
    cells = picture.cells
    assert set(cells) == {"temperature", "viscosity", "strain_rate", "velocity", "pressure"}, cells.keys()
    assert cells["velocity"].shape[-1] == 3
    assert np.all(cells["velocity"][..., 2] == 0)
    assert np.all(picture.points[..., 2] == 0)
    temperature = cells["temperature"]
    assert 0 < temperature.min() < 0.05 and 0.95 < temperature.max() < 1
    assert np.all(np.diff(temperature, axis=1) < 0), "temperature must fall outwards"
    np.testing.assert_allclose(cells["viscosity"], np.exp(-13.8 * temperature), rtol=1e-5)
    assert np.all(cells["strain_rate"] == 2)
    assert np.all(cells["pressure"] == np.arange(len(temperature))[:, None])


def check_area(picture, expected):
    """No gap and no overlap: cells have one orientation and sum to the area, less the arcs' segments."""
    areas = picture.plane_areas()
    assert np.all(np.sign(areas) == np.sign(areas[0, 0]))
    whole, width = expected["area"], expected["angle"] / expected["lateral"]
    if picture.shape.name != viewed.BOX:
        whole *= np.sin(width) / width
    np.testing.assert_allclose(np.abs(areas).sum(), whole, rtol=viewed.FLOAT32)


def check_seam(picture, expected):
    if not expected["periodic"]:
        return
    np.testing.assert_array_equal(picture.psi[0], picture.psi[-1])
    if picture.shape.name != viewed.BOX:
        np.testing.assert_allclose(picture.points[0], picture.points[-1], atol=1e-6)


def check_velocity(picture, expected):
    """Against the flux through the middle circle that C++ has summed, and against the stream function."""
    up = picture.velocity()[0]
    row, width = expected["row"], expected["angle"] / expected["lateral"]
    radius = np.linalg.norm(picture.points[0, row : row + 2, :2], axis=-1).mean()
    length = width * (1 if picture.shape.name == viewed.BOX else radius)
    np.testing.assert_allclose(np.abs(up[:, row]).sum() * length, expected["flux"], rtol=1e-5)
    viewed.check_flux_of_rows(picture)


def check_walls(state, expected):
    cells = {name.removeprefix("cell."): a for name, a in state.items() if name.startswith("cell.")}
    assert set(cells) == {"heat_flux", "normal_stress", "velocity", "wall"}
    n = expected["lateral"]
    assert list(state["counts"]) == [2 * (n + 1), 2 * n]
    assert np.all(cells["wall"] == np.repeat([0, 1], n))
    assert np.all(cells["normal_stress"] == np.repeat([-1, 5], n))
    assert np.all(cells["heat_flux"] == np.tile(np.arange(n) + 1, 2))
    np.testing.assert_allclose(np.linalg.norm(cells["velocity"], axis=1), 3, rtol=1e-6)
    along = np.diff(state["points"][state["lines"]].astype(float), axis=1)[:, 0]
    along /= np.linalg.norm(along, axis=1, keepdims=True)
    np.testing.assert_allclose(cells["velocity"], 3 * along, atol=1e-4)


def check_tables(folder, expected):
    for name, rows in (("walls/walls_0001.csv", expected["lateral"]), ("profiles/profiles_0001.csv", expected["radial"])):
        with open(os.path.join(folder, name), encoding="utf-8") as file:
            lines = [line for line in file if not line.startswith("#")]
        table = np.loadtxt(lines[1:], delimiter=",")
        assert table.shape == (rows, len(lines[0].split(","))), name


def check_sample(folder):
    expected = json.loads(runs.read(os.path.join(folder, "expected.json")))
    fields = collection(os.path.join(folder, "fields.pvd"))
    assert [time for time, _ in fields] == [0.0, 0.1 / 3]
    for time, path in fields:
        state = vtk_arrays.state_of(read("fields", path), time)
        assert state["time"] == time
        picture = viewed.Picture(state, SHAPES[expected["shape"]], expected["lateral"], expected["radial"])
        check_arrays(picture)
        check_area(picture, expected)
        check_seam(picture, expected)
        check_velocity(picture, expected)
    for time, path in collection(os.path.join(folder, "walls.pvd")):
        state = vtk_arrays.state_of(read("walls", path), time)
        assert state["time"] == time
        check_walls(state, expected)
    check_tables(folder, expected)


def check_samples(folder, ranks):
    command = [os.path.abspath("io_test"), "--gtest_filter=ParallelSnapshot.EveryGeometryIsWritten"]
    launcher = ["mpirun", "-np", str(ranks)] if ranks > 1 else []
    environment = dict(runs.ENVIRONMENT, LIDWRIGHT_SAMPLES=folder)
    subprocess.run(launcher + command, env=environment, check=True, stdout=subprocess.DEVNULL)
    names = sorted(name for name in os.listdir(folder) if os.path.isdir(os.path.join(folder, name)))
    assert len(names) == 6, names
    for name in names:
        pieces = [f for f in os.listdir(os.path.join(folder, name, "fields")) if f.startswith("fields_0000_piece")]
        assert len(pieces) == ranks
        check_sample(os.path.join(folder, name))
        print(f"sample {name}: fine on {ranks} ranks")


for n in viewer_runs.RANKS:
    with runs.Scratch() as scratch:
        check_samples(scratch.name, n)
with runs.Scratch() as scratch:
    viewer_runs.make(scratch.name)
    viewer_runs.check(scratch.name, account_of)
