"""Checks on what a viewer shows of a run folder, on the viewer's own numbers. NumPy only.

A viewer's account of a run is {"fields": [state, ...], "walls": [state, ...]}, by time; a state is a flat
dictionary of arrays (vtk_arrays.py makes them):
    time, listed_time     as in the file, and as in the list of times
    points                n x 3
    cell.NAME, point.NAME the arrays, and range.NAME, the extremes as the viewer says them
    counts                numbers of points and of cells
    lines                 walls: m x 2 numbers of points
    cut.points, cut.psi, cut.velocity   fields: the viewer's own cut along a circle (a level in the box),
                                        m x 2 x 3, m x 2 and m x 3
"""

import numpy as np

BOX, ANNULUS, SPHERICAL_ANNULUS, SHELL = "box", "annulus", "spherical-annulus", "axisymmetric"
FLOAT32 = 2e-6  # relative accuracy of sums of Float32 numbers
CUT = 0.005  # second order, (height of a cell over radius)^2: 0.002 on the grids of viewer_runs.py


class Shape:
    """Where points are and how large surfaces are, from coordinates in the plane of the picture."""

    def __init__(self, name):
        self.name = name

    def radius(self, points):
        return points[..., 1] if self.name == BOX else np.hypot(points[..., 0], points[..., 1])

    def lateral(self, points):
        """x, longitude in [0, 2 pi) or colatitude."""
        x, y = points[..., 0], points[..., 1]
        if self.name == BOX:
            return x
        return np.arctan2(x, y) if self.name == SHELL else np.mod(np.arctan2(y, x), 2 * np.pi)

    def step(self, begin, end):
        """From one lateral coordinate to the next, across the seam of a circle too."""
        change = end - begin
        if self.name in (ANNULUS, SPHERICAL_ANNULUS):
            change = np.mod(change + np.pi, 2 * np.pi) - np.pi
        return change

    def area(self, radius, begin, end):
        """Of the surface at a radius between two lateral coordinates, as docs/conventions.md defines it."""
        if self.name == SHELL:
            return 2 * np.pi * radius**2 * (np.cos(begin) - np.cos(end))
        return self.step(begin, end) * radius ** {BOX: 0, ANNULUS: 1, SPHERICAL_ANNULUS: 2}[self.name]

    def upwards(self, points):
        """Unit vectors of the radial direction."""
        if self.name == BOX:
            return np.broadcast_to([0.0, 1.0], points[..., :2].shape)
        return points[..., :2] / np.linalg.norm(points[..., :2], axis=-1, keepdims=True)

    def forwards(self, points):
        """Unit vectors of growing lateral coordinate."""
        up = self.upwards(points)
        turn = np.stack([up[..., 1], -up[..., 0]], axis=-1)
        return turn if self.name in (BOX, SHELL) else -turn


class Picture:
    """One state of the fields as whole arrays, indexed [lateral, radial]."""

    def __init__(self, state, shape, lateral, radial):
        self.shape, self.state = Shape(shape), state
        self.points = state["points"].reshape(lateral + 1, radial + 1, 3).astype(float)
        self.cells = {
            name.removeprefix("cell."): a.reshape(lateral, radial, *a.shape[1:]).astype(float)
            for name, a in state.items()
            if name.startswith("cell.")
        }
        self.psi = state["point.stream_function"].reshape(lateral + 1, radial + 1).astype(float)

    def corners_of_cells(self):
        p = self.points[..., :2]
        return p[:-1, :-1], p[:-1, 1:], p[1:, 1:], p[1:, :-1]

    def plane_areas(self):
        """Of the cells in the picture's plane, with the sign of their orientation."""
        a, b, c, d = self.corners_of_cells()
        across, along = c - a, d - b
        return (across[..., 0] * along[..., 1] - across[..., 1] * along[..., 0]) / 2

    def middles(self):
        return sum(self.corners_of_cells()) / 4

    def velocity(self):
        """Radial and lateral component."""
        v = self.cells["velocity"][..., :2]
        m = self.middles()
        return np.sum(v * self.shape.upwards(m), axis=-1), np.sum(v * self.shape.forwards(m), axis=-1)

    def fluxes(self):
        """Through radial and lateral faces, > 0 outwards and forwards, from the stream function."""
        return np.diff(self.psi, axis=0), -np.diff(self.psi, axis=1)

    def radial_areas(self):
        """Of the radial faces."""
        lateral = self.shape.lateral(self.points[:, -1])  # at a pole all points of a column have one
        return self.shape.area(self.shape.radius(self.points[:-1]), lateral[:-1, None], lateral[1:, None])

    def volumes(self):
        r = self.shape.radius(self.points[0])
        power = {BOX: 1, ANNULUS: 2}.get(self.shape.name, 3)
        unit = self.radial_areas()[:, -1:] / r[-1] ** (power - 1)
        return unit * np.diff(r**power)[None, :] / power


def check_signs(component, flux):
    clear = np.abs(flux) > 0.05 * np.abs(flux).max()
    assert clear.mean() > 0.5
    assert np.all(np.sign(component[clear]) == np.sign(flux[clear])), "vectors point the wrong way"


def check_flux_of_rows(picture):
    """Velocity times area between any two angles, row by row, against differences of the stream function."""
    up, forward = picture.velocity()
    across, along = picture.fluxes()
    area = picture.radial_areas()
    through = (across[:, :-1] / area[:, :-1] + across[:, 1:] / area[:, 1:]) / 2
    middle = (area[:, :-1] + area[:, 1:]) / 2
    difference = np.cumsum((up - through) * middle, axis=0)
    assert np.abs(difference).max() < 1e-4 * np.abs(through * middle).sum(axis=0).max(), "flux through a circle"
    check_signs(up, across[:, :-1] + across[:, 1:])
    check_signs(forward, along[:-1] + along[1:])


def check_flux_of_cut(state, shape):
    """The same through the circle that the viewer itself cut, piece by piece."""
    shape, points = Shape(shape), state["cut.points"].astype(float)
    lateral = shape.lateral(points)
    backwards = shape.step(lateral[:, 0], lateral[:, 1]) < 0
    points[backwards] = points[backwards][:, ::-1]
    psi = state["cut.psi"].astype(float)
    psi[backwards] = psi[backwards][:, ::-1]
    middle = points.mean(axis=1)
    up = np.sum(state["cut.velocity"][:, :2] * shape.upwards(middle), axis=-1)
    lateral = shape.lateral(points)
    ours = up * shape.area(shape.radius(points).mean(axis=1), lateral[:, 0], lateral[:, 1])
    expected = psi[:, 1] - psi[:, 0]
    order = np.argsort(shape.lateral(middle))
    apart = np.abs(np.cumsum((ours - expected)[order]))
    assert apart.max() < CUT * np.abs(expected).sum(), f"cut circle: {apart.max()} of {np.abs(expected).sum()}"
    assert np.abs(expected).sum() > 0
    return apart.max() / np.abs(expected).sum()


def check_range(state, name, low, high):
    np.testing.assert_allclose(state[f"range.{name}"], [low, high], rtol=FLOAT32, atol=1e-7, err_msg=name)


def check_field(state, case, row):
    """One state of the fields; `row`: of the history, by name, at the same time."""
    radial, lateral, shape = case["grid"]["radial"], case["grid"]["lateral"], case["shell"]["geometry"]
    assert list(state["counts"]) == [(radial + 1) * (lateral + 1), radial * lateral], state["counts"]
    names = {name for name in state if name.startswith(("cell.", "point."))}
    expected = {"cell.temperature", "cell.viscosity", "cell.strain_rate", "cell.velocity", "cell.pressure", "point.stream_function"}
    assert names == expected, names
    assert state["cell.velocity"].shape == (radial * lateral, 3)
    for name in names - {"cell.velocity"}:
        values = state[name]
        check_range(state, name.split(".")[1], values.min(), values.max())
    check_range(state, "temperature", row["temperature_min"], row["temperature_max"])
    assert state["range.viscosity"][0] > 0 and state["range.strain_rate"][0] >= 0
    assert np.all(state["cell.velocity"][:, 2] == 0) and np.all(state["points"][:, 2] == 0)
    picture = Picture(state, shape, lateral, radial)
    volume = picture.volumes()
    mean = (picture.cells["temperature"] * volume).sum() / volume.sum()
    np.testing.assert_allclose(mean, row["temperature_mean"], rtol=5e-6)
    up, forward = picture.velocity()
    rms = np.sqrt(((up**2 + forward**2) * volume).sum() / volume.sum())
    np.testing.assert_allclose(rms, row["velocity_rms"], rtol=0.05)  # means of two faces: a little less
    check_flux_of_rows(picture)
    return check_flux_of_cut(state, shape)


def check_wall(state, case, row):
    lateral, shape = case["grid"]["lateral"], Shape(case["shell"]["geometry"])
    assert list(state["counts"]) == [2 * (lateral + 1), 2 * lateral], state["counts"]
    names = {name for name in state if name.startswith(("cell.", "point."))}
    assert names == {"cell.heat_flux", "cell.normal_stress", "cell.velocity", "cell.wall"}, names
    points = state["points"][state["lines"]].astype(float)
    along = shape.lateral(points)
    area = shape.area(shape.radius(points).mean(axis=1), along[:, 0], along[:, 1])
    direction = points[:, 1, :2] - points[:, 0, :2]
    direction /= np.linalg.norm(direction, axis=1, keepdims=True)
    assert np.all(area > 0), "lines run towards larger lateral coordinate"
    for wall, name in enumerate(("inner", "outer")):
        here = state["cell.wall"] == wall
        assert here.sum() == lateral
        heat = (state["cell.heat_flux"][here] * area[here]).sum()
        np.testing.assert_allclose(heat, row[f"heat_flow_{name}"], rtol=1e-5)
        mean_stress = (state["cell.normal_stress"][here] * area[here]).sum() / area[here].sum()
        assert abs(mean_stress) < 1e-3 * np.abs(state["cell.normal_stress"][here]).max()
        v = state["cell.velocity"][here][:, :2].astype(float)
        np.testing.assert_allclose(np.abs(np.sum(v * direction[here], axis=1)), np.linalg.norm(v, axis=1), rtol=1e-4, atol=1e-5)
        rms = np.sqrt((np.sum(v**2, axis=1) * area[here]).sum() / area[here].sum())
        np.testing.assert_allclose(rms, row[f"velocity_rms_{name}"], rtol=0.05)


def check_along_walls(walls, fields, case):
    """The walls' velocity goes the way that the field's does in the cells beside them."""
    picture = Picture(fields, case["shell"]["geometry"], case["grid"]["lateral"], case["grid"]["radial"])
    forward = picture.velocity()[1]
    for wall, column in ((0, 0), (1, -1)):
        velocity = walls["cell.velocity"][walls["cell.wall"] == wall][:, :2].astype(float)
        check_signs(np.sum(velocity * picture.shape.forwards(picture.middles()[:, column]), axis=1), forward[:, column])


def check_run(viewed, case, history):
    """All states of a run; `history`: columns by name. Says the largest error of the cut's flux."""
    row_at = {t: {name: column[k] for name, column in history.items()} for k, t in enumerate(history["time"])}
    times = [float(state["listed_time"]) for state in viewed["fields"]]
    assert len(times) > 2 and times == sorted(set(times)) and times[0] == 0, times
    assert times == [float(state["listed_time"]) for state in viewed["walls"]]
    worst = 0
    for fields, walls in zip(viewed["fields"], viewed["walls"]):
        time = float(fields["listed_time"])
        assert float(fields["time"]) == float(walls["time"]) == time
        worst = max(worst, check_field(fields, case, row_at[time]))
        check_wall(walls, case, row_at[time])
        check_along_walls(walls, fields, case)
    return worst


def expect_same(viewed, other):
    """Two accounts of the same run, as from 1 and 3 ranks; `other` may have other pieces, not other numbers."""
    for kind in ("fields", "walls"):
        assert len(viewed[kind]) == len(other[kind])
        for a, b in zip(viewed[kind], other[kind]):
            assert a.keys() == b.keys()
            for name in a:
                if not name.startswith("cut."):
                    scale = np.abs(a[name]).max()
                    np.testing.assert_allclose(b[name], a[name], rtol=1e-5, atol=1e-6 * scale, err_msg=f"{kind} {name}")
