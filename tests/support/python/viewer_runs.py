"""Short marches for viewers to open, in every geometry on 1 and 3 ranks, and the checks of what was shown.

tests/viewers/paraview.sh calls it:  viewer_runs.py PROGRAM make|check FOLDER
"""

import os
import sys
import tomllib

import numpy as np

import runs
import viewed

GEOMETRIES = {
    "box": 'geometry = "box"\nwidth = 2',
    "annulus": 'geometry = "annulus"\nradius_ratio = 0.5',
    "spherical_annulus": 'geometry = "spherical-annulus"\nradius_ratio = 0.5',
    "axisymmetric": 'geometry = "axisymmetric"\nradius_ratio = 0.5',
}
RANKS = (1, 3)
CASE = """\
[numbers]
rayleigh = 1e5
[shell]
{shell}
[grid]
radial = 16
lateral = 72
inner_refinement = 2
outer_refinement = 2
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
[viscosity.exponential]
thermal_contrast = 30
[initial]
modes = [{{ lateral = 3, radial = 1, amplitude = 0.2 }}, {{ lateral = 2, radial = 1, amplitude = 0.1 }}]
[march]
end_time = 1
most_steps = 3
[output]
pictures = false
report = false
snapshot_every = 1e-9
"""


def names():
    return [f"{geometry}_{ranks}" for geometry in GEOMETRIES for ranks in RANKS]


def make(folder):
    for geometry, shell in GEOMETRIES.items():
        case_file = os.path.join(folder, f"{geometry}.toml")
        with open(case_file, "w", encoding="utf-8") as file:
            file.write(CASE.format(shell=shell))
        for ranks in RANKS:
            into = os.path.join(folder, f"{geometry}_{ranks}")
            runs.expect(runs.run("march", case_file, "--into", into, ranks=ranks), runs.DONE)
            pieces = [f for f in os.listdir(os.path.join(into, "fields")) if f.startswith("fields_0000_piece")]
            assert len(pieces) == ranks, pieces


def radial_cells(run):
    return tomllib.loads(runs.read(os.path.join(run, "case_as_read.toml")))["grid"]["radial"]


def check(folder, read):
    """`read(run)` is the viewer's account of a run folder."""
    accounts = {name: read(os.path.join(folder, name)) for name in names()}
    for name, account in accounts.items():
        run = os.path.join(folder, name)
        case = tomllib.loads(runs.read(os.path.join(run, "case_as_read.toml")))
        worst = viewed.check_run(account, case, runs.columns(run))
        ranges = ["{:.4g} to {:.4g}".format(*account["fields"][-1][f"range.{q}"]) for q in ("temperature", "viscosity")]
        print(
            f"{name}: {len(account['fields'])} times; temperature {ranges[0]}, viscosity {ranges[1]}; "
            f"flux through the cut circle within {worst:.1e} of the stream function's: fine"
        )
    for geometry in GEOMETRIES:
        viewed.expect_same(accounts[f"{geometry}_{RANKS[0]}"], accounts[f"{geometry}_{RANKS[1]}"])
    expect_wrong_vectors_are_seen(folder, accounts)


def expect_wrong_vectors_are_seen(folder, accounts):
    """The checks themselves: a field whose vectors are turned, or mirrored, does not pass."""
    for name, account in accounts.items():
        case = tomllib.loads(runs.read(os.path.join(folder, name, "case_as_read.toml")))
        for factors in ([-1, -1, 1], [1, -1, 1]):
            for array, passes in (("cell.velocity", viewed_rows), ("cut.velocity", viewed_cut)):
                state = dict(account["fields"][-1])
                state[array] = state[array] * np.array(factors)
                try:
                    passes(state, case)
                except AssertionError:
                    continue
                raise AssertionError(f"{name}: {array} times {factors} passes for right")


def viewed_rows(state, case):
    grid = case["grid"]
    viewed.check_flux_of_rows(viewed.Picture(state, case["shell"]["geometry"], grid["lateral"], grid["radial"]))


def viewed_cut(state, case):
    viewed.check_flux_of_cut(state, case["shell"]["geometry"])


def stored(run):
    """The account that paraview_arrays.py left beside the run."""
    account = {"fields": [], "walls": []}
    with np.load(run + ".npz") as file:
        for key in file.files:
            kind, number, name = key.split("|")
            while len(account[kind]) <= int(number):
                account[kind].append({})
            account[kind][int(number)][name] = file[key]
    return account


if __name__ == "__main__":
    if sys.argv[2] == "make":
        make(sys.argv[3])
    else:
        check(sys.argv[3], stored)
