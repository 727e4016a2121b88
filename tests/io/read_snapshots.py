"""Opens snapshots with VTK's own readers, as a general viewer does, and checks what it shows.

Called by ctest with the path of the program, from the folder of the test programs: lets io_test write its
samples on 1 and 3 ranks. Or by hand with a folder of samples. Exit code 77: Python's VTK is missing.
"""

import json
import os
import subprocess
import sys
import tempfile
import xml.etree.ElementTree as ElementTree

try:
    import numpy as np
    from vtkmodules.util.numpy_support import vtk_to_numpy
    from vtkmodules.vtkIOXML import vtkXMLPolyDataReader, vtkXMLPStructuredGridReader
except ImportError as error:
    print(f"skipped: {error} (packages python3-vtk9, python3-numpy)")
    sys.exit(77)

BOX, ANNULUS, SPHERICAL_ANNULUS, SHELL = range(4)
FLOAT32 = 2e-6  # relative accuracy of sums of Float32 numbers


def read(reader, path):
    reader.SetFileName(path)
    reader.Update()
    assert reader.GetErrorCode() == 0, path
    return reader.GetOutput()


def arrays(attributes):
    return {
        attributes.GetArrayName(k): vtk_to_numpy(attributes.GetArray(k))
        for k in range(attributes.GetNumberOfArrays())
    }


def collection(path):
    entries = ElementTree.parse(path).getroot().iter("DataSet")
    folder = os.path.dirname(path)
    return [(float(e.get("timestep")), os.path.join(folder, e.get("file"))) for e in entries]


class Picture:
    """One snapshot as whole arrays, indexed [lateral, radial]."""

    def __init__(self, path, expected):
        self.expected = expected
        self.grid = read(vtkXMLPStructuredGridReader(), path)
        shape = (expected["lateral"], expected["radial"])
        corners = (shape[0] + 1, shape[1] + 1)
        self.points = vtk_to_numpy(self.grid.GetPoints().GetData()).reshape(*corners, 3).astype(float)
        self.cells = {
            name: a.reshape(*shape, *a.shape[1:]).astype(float)
            for name, a in arrays(self.grid.GetCellData()).items()
        }
        self.point_arrays = {name: a.reshape(corners).astype(float) for name, a in arrays(self.grid.GetPointData()).items()}

    def corners_of_cells(self):
        p = self.points[..., :2]
        return p[:-1, :-1], p[:-1, 1:], p[1:, 1:], p[1:, :-1]

    def areas(self):
        a, b, c, d = self.corners_of_cells()
        across, along = c - a, d - b
        return (across[..., 0] * along[..., 1] - across[..., 1] * along[..., 0]) / 2

    def middles(self):
        return sum(self.corners_of_cells()) / 4

    def upwards(self):
        """Unit vector of the radial direction in every cell."""
        if self.expected["shape"] == BOX:
            return np.broadcast_to([0.0, 1.0], self.middles().shape)
        m = self.middles()
        return m / np.linalg.norm(m, axis=-1, keepdims=True)

    def forwards(self):
        """Unit vector of growing lateral coordinate."""
        up = self.upwards()
        turn = np.stack([up[..., 1], -up[..., 0]], axis=-1)
        return turn if self.expected["shape"] in (BOX, SHELL) else -turn


def check_arrays(picture):
    assert set(picture.cells) == {"temperature", "viscosity", "strain_rate", "velocity", "pressure"}, picture.cells.keys()
    assert set(picture.point_arrays) == {"stream_function"}
    assert picture.cells["velocity"].shape[-1] == 3
    assert np.all(picture.cells["velocity"][..., 2] == 0)
    assert np.all(picture.points[..., 2] == 0)
    temperature = picture.cells["temperature"]
    assert 0 < temperature.min() < 0.05 and 0.95 < temperature.max() < 1
    assert np.all(np.diff(temperature, axis=1) < 0), "temperature must fall outwards"
    np.testing.assert_allclose(picture.cells["viscosity"], np.exp(-13.8 * temperature), rtol=1e-5)
    assert np.all(picture.cells["strain_rate"] == 2)
    assert np.all(picture.cells["pressure"] == np.arange(picture.expected["lateral"])[:, None])


def check_area(picture):
    """No gap and no overlap: cells have one orientation and sum to the area, less the arcs' segments."""
    areas = np.abs(picture.areas())
    assert np.all(np.sign(picture.areas()) == np.sign(picture.areas()[0, 0]))
    expected, width = picture.expected["area"], picture.expected["angle"] / picture.expected["lateral"]
    if picture.expected["shape"] != BOX:
        expected *= np.sin(width) / width
    np.testing.assert_allclose(areas.sum(), expected, rtol=FLOAT32)


def check_seam(picture):
    if not picture.expected["periodic"]:
        return
    psi = picture.point_arrays["stream_function"]
    np.testing.assert_array_equal(psi[0], psi[-1])
    if picture.expected["shape"] != BOX:
        np.testing.assert_allclose(picture.points[0], picture.points[-1], atol=1e-6)


def check_velocity(picture):
    """Vectors against the flux through the middle circle, and against the stream function, sign by sign."""
    velocity = picture.cells["velocity"][..., :2]
    up = np.sum(velocity * picture.upwards(), axis=-1)
    forward = np.sum(velocity * picture.forwards(), axis=-1)
    row, width = picture.expected["row"], picture.expected["angle"] / picture.expected["lateral"]
    radius = np.linalg.norm(picture.points[0, row : row + 2, :2], axis=-1).mean()
    length = width * (1 if picture.expected["shape"] == BOX else radius)
    np.testing.assert_allclose(np.abs(up[:, row]).sum() * length, picture.expected["flux"], rtol=1e-5)
    psi = picture.point_arrays["stream_function"]
    across, along = np.diff(psi, axis=0), -np.diff(psi, axis=1)  # fluxes through radial and lateral faces
    check_signs(up, across[:, :-1] + across[:, 1:])
    check_signs(forward, along[:-1] + along[1:])


def check_signs(component, flux):
    clear = np.abs(flux) > 0.05 * np.abs(flux).max()
    assert clear.mean() > 0.5
    assert np.all(np.sign(component[clear]) == np.sign(flux[clear]))


def check_time(data, time):
    values = arrays(data.GetFieldData())["TimeValue"]
    assert list(values) == [time], values


def check_walls(path, expected, time):
    lines = read(vtkXMLPolyDataReader(), path)
    check_time(lines, time)
    cells = arrays(lines.GetCellData())
    assert set(cells) == {"heat_flux", "normal_stress", "velocity", "wall"}
    n = expected["lateral"]
    assert lines.GetNumberOfCells() == 2 * n
    assert np.all(cells["wall"] == np.repeat([0, 1], n))
    assert np.all(cells["normal_stress"] == np.repeat([-1, 5], n))
    assert np.all(cells["heat_flux"] == np.tile(np.arange(n) + 1, 2))
    points = vtk_to_numpy(lines.GetPoints().GetData()).reshape(2, n + 1, 3).astype(float)
    np.testing.assert_allclose(np.linalg.norm(cells["velocity"], axis=1), 3, rtol=1e-6)
    along = np.diff(points, axis=1).reshape(-1, 3)
    along /= np.linalg.norm(along, axis=1, keepdims=True)
    np.testing.assert_allclose(cells["velocity"], 3 * along, atol=1e-4)


def check_tables(folder, expected):
    for name, rows in (("walls/walls_0001.csv", expected["lateral"]), ("profiles/profiles_0001.csv", expected["radial"])):
        with open(os.path.join(folder, name), encoding="utf-8") as file:
            lines = [line for line in file if not line.startswith("#")]
        table = np.loadtxt(lines[1:], delimiter=",")
        assert table.shape == (rows, len(lines[0].split(","))), name


def check_sample(folder):
    with open(os.path.join(folder, "expected.json"), encoding="utf-8") as file:
        expected = json.load(file)
    fields = collection(os.path.join(folder, "fields.pvd"))
    assert [time for time, _ in fields] == [0.0, 0.1 / 3]
    for time, path in fields:
        picture = Picture(path, expected)
        check_time(picture.grid, time)
        check_arrays(picture)
        check_area(picture)
        check_seam(picture)
        check_velocity(picture)
    for time, path in collection(os.path.join(folder, "walls.pvd")):
        check_walls(path, expected, time)
    check_tables(folder, expected)


def check_samples(folder, ranks):
    names = sorted(os.listdir(folder))
    assert len(names) == 6, names
    for name in names:
        if ranks:
            pieces = [f for f in os.listdir(os.path.join(folder, name, "fields")) if f.startswith("fields_0000_piece")]
            assert len(pieces) == ranks
        check_sample(os.path.join(folder, name))
        print(f"{name}: fine" + (f" on {ranks} ranks" if ranks else ""))


def write_and_check(test_program, ranks):
    with tempfile.TemporaryDirectory() as folder:
        environment = dict(os.environ, LIDWRIGHT_SAMPLES=folder)
        command = [test_program, "--gtest_filter=ParallelSnapshot.EveryGeometryIsWritten"]
        launcher = ["mpirun", "-np", str(ranks)] if ranks > 1 else []
        subprocess.run(launcher + command, env=environment, check=True, stdout=subprocess.DEVNULL)
        check_samples(folder, ranks)


if __name__ == "__main__":
    if os.path.isdir(sys.argv[1]):
        check_samples(sys.argv[1], None)
    else:
        for n in (1, 3):
            write_and_check(os.path.abspath("io_test"), n)
