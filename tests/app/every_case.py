"""Every case of cases/ runs: coarsely for a while, with results that make sense, and for some steps as it stands."""

import math
import os
import re
import sys
import tomllib
import xml.etree.ElementTree as ElementTree

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

CASES = os.path.join(runs.SOURCE, "cases")
COARSE = runs.settings(grid__radial=12, grid__lateral=48, march__most_steps=30)
# Columns of docs/diagnostics.md that coarse, young convection may leave undefined.
MAY_BE_UNDEFINED = {
    "plateness", "velocity_rms_lid_base", "lid_thickness_isotherm", "lid_thickness_advection", "lid_thickness_conduction",
    "boundary_layer_inner", "temperature_internal", "rayleigh_internal", "rheological_temperature", "frank_kamenetskii",
}
ON_SEVERAL_RANKS = "layered_viscosity.toml"


def check_history(folder, case):
    h = runs.columns(folder)
    steps = len(h["step"])
    assert h["step"] == list(range(steps)) and steps > 3, h["step"]
    for name, column in h.items():
        wrong = [x for x in column[1:] if not math.isfinite(x) and not (name in MAY_BE_UNDEFINED and math.isnan(x))]
        assert not wrong, (name, wrong)
    slips = case["walls"]["outer"]["flow"] == "free-slip"
    assert all((x > 0) == slips for x in h["mobility"]), h["mobility"]
    assert all(math.isfinite(x) == slips for x in h["plateness"]), h["plateness"]
    for name in ("topography_rms_outer", "stress_rms_outer"):
        assert all(x > 0 for x in h[name]), name
    for name in MAY_BE_UNDEFINED - {"plateness"}:
        assert all(x >= 0 or math.isnan(x) for x in h[name]), (name, h[name])
    assert h["time"][0] == 0 and all(a < b for a, b in zip(h["time"], h["time"][1:]))
    for k in range(1, steps):
        assert math.isclose(h["time"][k] - h["time"][k - 1], h["time_step"][k], rel_tol=1e-9)
    assert all(a <= b for a, b in zip(h["applications"], h["applications"][1:]))
    assert h["factorisations"][0] >= 1
    tolerance = case["flow"]["tolerance"]
    for k in range(steps):
        low, mean, high = h["temperature_min"][k], h["temperature_mean"][k], h["temperature_max"][k]
        assert -0.2 < low < mean < high < 1.5, (low, mean, high)
        assert h["velocity_rms"][k] > 0 and h["dissipation"][k] > 0
        assert abs(h["work_mismatch"][k]) < max(100 * tolerance**2, 1e-6), h["work_mismatch"][k]
    assert max(abs(x) for x in h["heat_budget_residual"][1:]) < 1e-10, "the heat budget is open"
    if case["walls"]["inner"].get("insulating"):
        assert all(x == 0 for x in h["heat_flow_inner"])
    else:
        assert all(0 < x < 100 for x in h["nusselt_inner"]), h["nusselt_inner"]
    assert all(0 < x < 200 for x in h["nusselt_outer"]), h["nusselt_outer"]
    return h


def check_snapshots(folder, ranks):
    for kind in ("fields", "walls"):
        entries = list(ElementTree.parse(os.path.join(folder, f"{kind}.pvd")).getroot().iter("DataSet"))
        assert len(entries) >= 2, f"{kind}: the first and the last state at least"
        times = [float(entry.get("timestep")) for entry in entries]
        assert times == sorted(set(times)) and times[0] == 0, times
        for n, entry in enumerate(entries):
            assert os.path.isfile(os.path.join(folder, entry.get("file"))), entry.get("file")
            assert f"{n:04d}" in entry.get("file")
    for n in range(len(entries)):
        index = ElementTree.parse(os.path.join(folder, "fields", f"fields_{n:04d}.pvts")).getroot()
        pieces = [piece.get("Source") for piece in index.iter("Piece")]
        assert len(pieces) == ranks
        assert all(os.path.isfile(os.path.join(folder, "fields", piece)) for piece in pieces)
        names = {array.get("Name") for array in index.iter("PDataArray")}
        assert {"temperature", "viscosity", "strain_rate", "velocity", "stream_function"} <= names, names
        for table in (f"walls/walls_{n:04d}.csv", f"walls/topography_{n:04d}.csv", f"profiles/profiles_{n:04d}.csv"):
            assert len(runs.read(os.path.join(folder, table)).splitlines()) > 12, table


def check_papers(folder, history, ranks):
    """Summary and provenance say what the history says."""
    summary = tomllib.loads(runs.read(os.path.join(folder, "summary.toml")))
    assert summary["steps"] == history["step"][-1] and summary["end"] == "number of steps reached", summary
    for name in ("time", "nusselt_outer", "nusselt_inner", "temperature_mean", "velocity_rms"):
        assert summary[name] == history[name][-1], name
    provenance = tomllib.loads(runs.read(os.path.join(folder, "provenance.toml")))
    (session,) = provenance["session"]
    assert session["ranks"] == ranks and session["first_step"] == 0 and session["last_step"] == history["step"][-1]
    assert session["started"] <= session["ended"] and session["compiler"] and session["library"]["petsc"]


def coarse_run(scratch, name):
    ranks = 3 if name == ON_SEVERAL_RANKS else 1
    folder = scratch.path(name)
    result = runs.expect(runs.run("march", os.path.join(CASES, name), "--into", folder, *COARSE, ranks=ranks), runs.DONE)
    assert result.err == "" and "Nusselt number" in result.out and folder in result.out, result
    case = tomllib.loads(runs.read(os.path.join(folder, "case_as_read.toml")))
    history = check_history(folder, case)
    check_snapshots(folder, ranks)
    check_papers(folder, history, ranks)
    assert runs.checkpoints(folder)[-1] == f"step_{int(history['step'][-1]):09d}.h5"
    runs.expect_no_leftovers(folder)
    return folder, ranks


def repeat(folder, ranks):
    """The stored case is complete: it gives the same run, without any --set."""
    again = folder + "_again"
    stored = os.path.join(folder, "case_as_read.toml")
    runs.expect(runs.run("march", stored, "--into", again, ranks=ranks), runs.DONE)
    runs.expect_same_run(again, folder)
    assert runs.read(os.path.join(again, "case_as_read.toml")) == runs.read(stored)


def as_committed(scratch, name):
    folder = scratch.path(name + "_whole")
    arguments = ["march", os.path.join(CASES, name), "--into", folder, "--set", "march.most_steps=4"]
    runs.expect(runs.run(*arguments), runs.DONE)
    assert runs.last_step(folder) == 4


def main():
    names = sorted(name for name in os.listdir(CASES) if name.endswith(".toml"))
    assert len(names) >= 5 and ON_SEVERAL_RANKS in names, names
    with runs.Scratch() as scratch:
        for name in names:
            comments = re.findall(r"^# .+", runs.read(os.path.join(CASES, name)), re.MULTILINE)
            assert comments, f"{name}: begins without a word on what it is"
            repeat(*coarse_run(scratch, name))
            as_committed(scratch, name)
            print(f"{name}: fine")


main()
