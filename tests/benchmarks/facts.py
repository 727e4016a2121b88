"""What everyone in the trade expects of a mantle (common practice, no source).

1. Convection stops where the Rayleigh number falls to the critical one: steady states of one viscosity reach Nu = 1 there, a march
   just below it dies, one just above goes on.
2. Under a stagnant lid it stops at a finite strength, where the branch of steady states folds back, below the Rayleigh number of linear
   onset; a march from convection dies below the fold and goes on above it.
3. A mantle whose sources fade, or that cools, stops convecting when the Rayleigh number of what moves has fallen to the critical one.
4. With the same rock and sources, a smaller body has a lid that is a larger part of its mantle.

Called by ctest with the path of the program.
"""

import csv
import math
import os
import sys
import tomllib

HERE = os.path.dirname(os.path.abspath(__file__))
sys.path.insert(0, os.path.join(HERE, "..", "support", "python"))
import runs  # noqa: E402

BOX = os.path.join(runs.SOURCE, "benchmarks", "physics", "blankenbach_1989_1a", "case.toml")
COARSE = runs.settings(grid__radial=16, grid__lateral=16, output__pictures="false", output__report="false")
# Of the unstable layer under a lid: Breuer & Spohn 2006, PSS 54, 153 (from memory). Whole layers between walls have 657.5 to 1707.8; which one
# holds under a lid depends on what counts as the lid, so that a factor of three must be left.
LOCAL_CRITICAL = 450
RADII = (1900, 2150, 2400)  # km

LID = """\
title = "a stagnant lid near its end"
[numbers]
rayleigh = 5e5                 # with the viscosity of the hot wall
[shell]
geometry = "box"
[grid]
radial = 16
lateral = 16
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
[viscosity.exponential]
thermal_contrast = 1e5
unity_at = 1
[initial]
base = "boundary-layers"
interior = 0.8
modes = [{ lateral = 1, radial = 1, amplitude = 0.2 }]
[transport]
flux = "central"               # as the steady states have it
accuracy = 1e-3
courant = 1
[march]
end_time = 3
[settle]
coarsest = 16
[output]
pictures = false
report = false
"""

COOLING = """\
title = "a mantle that cools under a stagnant lid"
[numbers]
rayleigh = 1e7
[shell]
geometry = "box"
width = 2
[grid]
radial = 32
lateral = 64
[walls.inner]
insulating = true
[walls.outer]
temperature = 0
[viscosity.exponential]
thermal_contrast = 1e6
unity_at = 1
[initial]
base = "boundary-layers"
interior = 1
layer_thickness = 0.2
modes = [{ lateral = 3, amplitude = 0.02 }, { lateral = 5, amplitude = 0.02 }]
noise = 0.01
[transport]
accuracy = 5e-4
courant = 1
[march]
end_time = 0.5
[output]
pictures = false
report = false
"""


def table(*path):
    lines = [line for line in runs.read(os.path.join(*path)).splitlines() if not line.startswith("#")]
    return list(csv.DictReader(lines))


def summary(folder):
    return tomllib.loads(runs.read(os.path.join(folder, "summary.toml")))


def lidwright(verb, case, folder, *more, code=runs.DONE, **settings):
    runs.expect(runs.run(verb, case, "--into", folder, *more, *runs.settings(**settings)), code)
    return folder


def stops_at_the_critical_rayleigh_number(scratch):
    onset = lidwright("onset", BOX, scratch.path("onset"), *COARSE, "--modes", "1:1", "--no-error-bars")
    critical = float(table(onset, "onset.csv")[0]["rayleigh"])
    print(f"one viscosity, box: Ra_c = {critical:.2f} (8 pi^4 = {8 * math.pi**4:.2f})")
    # Nu - 1 goes to 0 in a straight line of 1 - Ra_c/Ra (Malkus & Veronis 1958, from memory: with slope 2).
    rows = []
    for share in (1.04, 1.02):
        steady = lidwright("settle", BOX, scratch.path(f"steady_{share}"), *COARSE, numbers__rayleigh=share * critical)
        rows.append((1 - 1 / share, summary(steady)["nusselt_outer"] - 1))
    (x2, y2), (x1, y1) = rows
    slope = 2 * y1 / x1 - y2 / x2
    print(f"  (Nu - 1)/(1 - Ra_c/Ra) = {y2 / x2:.4f}, {y1 / x1:.4f}, at the onset {slope:.4f}; theory 2")
    assert abs(slope - 2) < 0.02
    ends = {}
    for share in (0.97, 1.05):
        folder = scratch.path(f"march_{share}")
        lidwright("march", BOX, folder, *COARSE, numbers__rayleigh=share * critical, march__end_time=4, march__steady=0)
        history = runs.columns(folder)
        half = len(history["time"]) // 2
        ends[share] = history["velocity_rms"][half], history["velocity_rms"][-1], history["nusselt_outer"][-1]
        print(f"  march at {share} Ra_c: v_rms {ends[share][0]:.3g}, then {ends[share][1]:.3g}, Nu {ends[share][2]:.4f}")
    assert ends[0.97][1] < 0.7 * ends[0.97][0] and abs(ends[0.97][2] - 1) < 1e-3, "it should have died"
    assert ends[1.05][1] > 0.9 * ends[1.05][0] and ends[1.05][2] > 1.05, "it should convect"


def rayleigh_of_what_moves(row):
    """Ra_i with the drop that drives, 2.2 DT_rh, and the thickness below the lid."""
    drop, lid = 2.2 * float(row["rheological_temperature"]), float(row["lid_thickness_isotherm"])
    return float(row["rayleigh_internal"]) * drop * (1 - lid) ** 3


def is_critical(number):
    return LOCAL_CRITICAL / 3 < number < LOCAL_CRITICAL * 3


def a_lid_stops_at_the_fold(scratch):
    case = scratch.write("lid.toml", LID)
    folder = scratch.path("branch")
    lidwright("settle", case, folder, "--along", "numbers.rayleigh=5e5:1.5e5:2", code=runs.NOT_SOLVED)
    rows = table(folder, "branch.csv")
    assert any(row["backwards"] == "1" for row in rows), "the branch should fold back"
    fold = min(rows, key=lambda row: float(row["parameter"]))
    least, nusselt, moving = float(fold["parameter"]), float(fold["nusselt_outer"]), rayleigh_of_what_moves(fold)
    onset = lidwright("onset", case, scratch.path("lid_onset"), "--modes", "1:3", "--no-error-bars", grid__radial=32)
    linear = min(float(row["rayleigh"]) for row in table(onset, "onset.csv"))
    print(f"stagnant lid: the branch folds back at Ra_1 = {least:.4g} (Nu {nusselt:.3f}); linear onset {linear:.4g}")
    print(f"  Rayleigh number of what moves at its start {rayleigh_of_what_moves(rows[0]):.4g}, at the fold {moving:.4g}")
    assert nusselt > 1.05 and least < 0.8 * linear, "convection should end at a finite strength, below the onset"
    assert is_critical(moving) and not is_critical(rayleigh_of_what_moves(rows[0])), moving
    steady = lidwright("settle", case, scratch.path("steady"), numbers__rayleigh=1.1 * least)
    start = {"initial__from": steady, "initial__modes": "[]"}
    ends = {}
    for share in (0.95, 1.05):
        march = lidwright("march", case, scratch.path(f"lid_{share}"), numbers__rayleigh=share * least, **start)
        ends[share] = runs.columns(march)["nusselt_outer"][-1]
        print(f"  march at {share} of it, from convection: Nu {ends[share]:.4f} after 3 diffusion times")
    assert abs(ends[0.95] - 1) < 1e-3 and ends[1.05] > nusselt, ends


def sources_that_fade(scratch):
    """So slowly that the mantle is steady all the time."""
    case = scratch.write("cooling.toml", COOLING)
    folder = scratch.path("fading")
    start = {"initial__interior": 0.75, "initial__layer_thickness": 0.4, "initial__noise": 0, "heat__uniform": 1.6}
    one_cell = {"shell__width": 1, "grid__radial": 24, "grid__lateral": 24, "settle__coarsest": 24}
    one_cell["initial__modes"] = "[{ lateral = 1, amplitude = 0.05 }]"
    along = ("--along", "heat.uniform=1.6:0.7:2")
    lidwright("settle", case, folder, *along, code=runs.NOT_SOLVED, **start, **one_cell)
    rows = [row for row in table(folder, "branch.csv") if float(row["velocity_rms"]) > 0.1]
    first, last = (rayleigh_of_what_moves(rows[k]) for k in (0, -1))
    end = f"the last convection at {float(rows[-1]['parameter']):.3f} (v_rms {float(rows[-1]['velocity_rms']):.2f})"
    print(f"sources that fade under a lid: from {first:.4g}; {end}: {last:.4g}")
    assert is_critical(last) and not is_critical(first), (first, last)


def a_cooling_mantle_stops(scratch):
    """It is later than critical: what moves still has to be slowed down while the mantle goes on cooling."""
    case = scratch.write("cooling.toml", COOLING)
    h = runs.columns(lidwright("march", case, scratch.path("cooling")))
    moving = [rayleigh_of_what_moves({name: h[name][k] for name in h}) for k in range(len(h["time"]))]
    # Stopped: at no depth is a tenth of the surface's heat advected.
    last = max(k for k, depth in enumerate(h["lid_thickness_advection"]) if not math.isnan(depth))
    print(f"cooling under a lid: from {moving[1]:.3g} (v_rms {h['velocity_rms'][1]:.3g}); advection stops at t = "
          f"{h['time'][last]:.3f}: {moving[last]:.4g} (v_rms {h['velocity_rms'][last]:.2g})")
    assert h["time"][last] < 0.9 * h["time"][-1], "it should have stopped"
    assert h["velocity_rms"][1] > 100 and moving[1] > 100 * LOCAL_CRITICAL, "it should have convected"
    assert is_critical(moving[last]), moving[last]


def a_smaller_body_has_a_larger_lid(scratch):
    case = os.path.join(HERE, "scaled_body.toml")
    lids = []
    for radius in RADII:
        scaled = {"body__radius": radius, "body__core_radius": radius / 2, "body__gravity": 3.35 * radius / 2000}
        folder = lidwright("march", case, scratch.path(str(radius)), **scaled)
        assert summary(folder)["known"] == "yes", summary(folder)
        found = {row["quantity"]: row for row in table(folder, "statistics.csv")}
        lid, speed = found["lid_thickness_isotherm"], runs.columns(folder)["velocity_rms"][-1]
        assert lid["finding"] in ("sound", "steady") and speed > 3, (lid, speed)
        lids.append((float(lid["mean"]), float(lid["error"])))
        print(f"radius {radius} km: lid {lids[-1][0]:.4f} +- {lids[-1][1]:.4f} d, {lids[-1][0] * radius / 2:.0f} km, v_rms {speed:.3g}")
    for (small, error), (large, other) in zip(lids, lids[1:]):
        assert small - error > large + other, lids


def main():
    with runs.Scratch() as scratch:
        stops_at_the_critical_rayleigh_number(scratch)
        a_lid_stops_at_the_fold(scratch)
        sources_that_fade(scratch)
        a_cooling_mantle_stops(scratch)
        a_smaller_body_has_a_larger_lid(scratch)


main()
