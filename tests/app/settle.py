"""`lidwright settle`: steady state, error bars, stability, branches; on one rank and three, Ctrl-C, and what it refuses."""

import csv
import os
import signal
import sys
import time
import tomllib

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

BENCHMARK = os.path.join(runs.SOURCE, "benchmarks", "physics", "blankenbach_1989_1a")
COARSE = runs.settings(grid__radial=32, grid__lateral=32)
ANNULUS = """\
title = "a plain annulus"
[numbers]
rayleigh = 5e3
[shell]
geometry = "annulus"
radius_ratio = 0.55
[grid]
radial = 16
lateral = 96
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
[initial]
modes = [{ lateral = 4, amplitude = 0.1 }]
"""


def settle(scratch, into, *more, code=runs.DONE, **options):
    arguments = ["settle", scratch.path("box.toml"), "--into", scratch.path(into), *more]
    return runs.expect(runs.run(*arguments, **options), code)


def summary(folder):
    return tomllib.loads(runs.read(os.path.join(folder, "summary.toml")))


def table(*path):
    lines = [line for line in runs.read(os.path.join(*path)).splitlines() if not line.startswith("#")]
    return list(csv.DictReader(lines))


def published():
    return {row["quantity"]: float(row["value"]) for row in table(BENCHMARK, "expected.csv") if row["mark"] == "confirmed"}


def published_values_within_error_bars(scratch):
    result = settle(scratch, "bars", *COARSE, "--error-bars", "--stability")
    assert result.err == "", result
    bars = {row["quantity"]: row for row in table(scratch.path("bars"), "error_bars.csv")}
    expected = published()
    for name in ("nusselt_outer", "velocity_rms"):
        value, half_width = float(bars[name]["value"]), float(bars[name]["half_width"])
        assert abs(value - expected[name]) < half_width < 0.01 * value, bars[name]
        assert 1.5 < float(bars[name]["order"]) < 2.5 and bars[name]["convergence"] == "sound", bars[name]
        assert name in result.out and "on_8x8" in bars[name] and "on_32x32" in bars[name]
    found = summary(scratch.path("bars"))
    assert found["end"] == "steady" and found["residual"] <= 1e-10 and found["stable"] == 1, found
    assert abs(found["heat_budget_residual"]) < 1e-9 and found["radial"] == 32, found
    growth = table(scratch.path("bars"), "growth_rates.csv")
    assert all(float(row["growth"]) < 0 for row in growth) and "stable: a simulation would stay here" in result.out


def files(scratch):
    written = runs.files(scratch.path("bars"))
    for name in (
        "case_as_read.toml provenance.toml summary.toml newton.csv error_bars.csv growth_rates.csv fields.pvd walls.pvd "
        "fields/fields_0000.pvts walls/walls_0000.csv profiles/profiles_0000.csv pictures/picture_0000.png "
        "checkpoints/step_000000000.h5 report.html"
    ).split():
        assert name in written, (name, written)
    runs.expect_no_leftovers(scratch.path("bars"))
    steps = table(scratch.path("bars"), "newton.csv")
    assert {row["radial"] for row in steps} >= {"8", "16", "32"} and float(steps[-1]["residual"]) <= 1e-10, steps
    assert "of a steady state" in runs.read(scratch.path("bars", "walls", "walls_0000.csv"))


def same_on_three_ranks(scratch):
    settle(scratch, "one", *COARSE)
    settle(scratch, "three", *COARSE, ranks=3)
    one, three = (summary(scratch.path(name)) for name in ("one", "three"))
    for name, value in one.items():
        if isinstance(value, float) and name not in ("wall_time", "work_mismatch"):
            assert abs(three[name] - value) <= 1e-10 * max(1, abs(value)), (name, value, three[name])
    for name in ("newton.csv", "checkpoints/step_000000000.h5", "pictures/picture_0000.png"):
        assert runs.digest(scratch.path("one", name)) == runs.digest(scratch.path("three", name)), name


def starts_from_it(scratch):
    from_there = runs.settings(initial__from=scratch.path("one"), initial__modes="[]")
    settle(scratch, "again", *COARSE, *from_there)
    again, one = (summary(scratch.path(name)) for name in ("again", "one"))
    assert again["end"] == "steady" and abs(again["nusselt_outer"] / one["nusselt_outer"] - 1) < 1e-9, again
    arguments = ["march", scratch.path("box.toml"), "--into", scratch.path("marched"), *COARSE, *from_there]
    runs.expect(runs.run(*arguments, "--set", "march.most_steps=3"), runs.DONE)
    last = runs.columns(scratch.path("marched"))
    assert last["temperature_change_rate"][-1] < 1e-4 and abs(last["nusselt_outer"][-1] / 4.8524 - 1) < 1e-4
    result = runs.expect(runs.run("march", "--resume", scratch.path("one")), runs.BAD_INPUT)
    assert "steady states" in result.err and "initial.from" in result.err, result


def says_so_when_nothing_convects(scratch):
    result = settle(scratch, "rest", *COARSE, "--set", "numbers.rayleigh=500", "--set", "output.pictures=false")
    found = summary(scratch.path("rest"))
    assert found["end"] == "does not convect" and "does not convect" in result.out and "initial.modes" in result.out
    assert abs(found["nusselt_outer"] - 1) < 1e-8 and not os.listdir(scratch.path("rest", "pictures"))


def a_full_circle(scratch):
    arguments = ["settle", scratch.write("annulus.toml", ANNULUS), "--into", scratch.path("annulus"), "--stability"]
    result = runs.expect(runs.run(*arguments), runs.DONE)
    growth = table(scratch.path("annulus"), "growth_rates.csv")
    turning = [row for row in growth if row["turning"] == "1"]
    assert len(turning) == 1 and abs(float(turning[0]["growth"])) < 1e-4, growth
    assert "turning the pattern round" in result.out and "stable: " in result.out, result


def not_converged(scratch):
    """The best state is there all the same."""
    few = runs.settings(settle__most_steps=1, settle__most_time=0.05)
    result = settle(scratch, "unsteady", *COARSE, *few, code=runs.NOT_SOLVED)
    folder = scratch.path("unsteady")
    assert len(result.err.splitlines()) == 1 and result.err.startswith("lidwright: no steady state"), result
    assert "settle.most_time" in result.err and folder in result.err and "not steady" in result.out, result
    assert summary(folder)["end"] == "not steady" and summary(folder)["remark"]
    assert "fields/fields_0000.pvts" in runs.files(folder) and runs.checkpoints(folder)
    assert 'reason = "not solved"' in runs.read(os.path.join(folder, "provenance.toml"))


def interrupted(scratch):
    """What was found is kept."""
    folder = scratch.path("stopped")
    large = runs.settings(grid__radial=128, grid__lateral=512, numbers__rayleigh=1e6)
    process = runs.start("settle", scratch.path("annulus.toml"), "--into", folder, *large, "--progress")
    while process.poll() is None and not os.path.exists(os.path.join(folder, "provenance.toml")):
        time.sleep(0.01)
    time.sleep(1)
    process.send_signal(signal.SIGINT)
    result = runs.expect(runs.finished(process), runs.INTERRUPTED)
    assert summary(folder)["end"] == "interrupted" and "interrupted" in result.out and "grid " in result.err, result
    assert runs.checkpoints(folder) and "fields/fields_0000.pvts" in runs.files(folder)
    runs.expect_no_leftovers(folder)


def along(scratch):
    few = runs.settings(grid__radial=16, grid__lateral=16)
    result = settle(scratch, "branch", *few, "--along", "numbers.rayleigh=1e4:1e5:3", "--stability", "--progress")
    rows = table(scratch.path("branch"), "branch.csv")
    asked = [row for row in rows if row["asked_for"] == "1"]
    values = [float(row["parameter"]) for row in asked]
    assert values[0] == 1e4 and values[2] == 1e5 and abs(values[1] / 10**4.5 - 1) < 1e-12, values
    assert [row["snapshot"] for row in asked] == ["0", "1", "2"] and all(float(row["growth"]) < 0 for row in asked), asked
    assert all(float(row["residual"]) <= 1e-10 for row in rows) and len(rows) >= 3
    nusselt = [float(row["nusselt_outer"]) for row in rows]
    assert nusselt == sorted(nusselt), nusselt
    written = runs.files(scratch.path("branch"))
    for name in ("branch.png", "newton.csv", "fields/fields_0002.pvts", "checkpoints/step_000000002.h5", "pictures/picture_0002.png"):
        assert name in written, name
    assert result.err.count("asked for") == 3 and "numbers.rayleigh" in result.out and "growth" in result.out, result
    assert summary(scratch.path("branch"))["end"] == "complete"
    settle(scratch, "end", *few, "--set", "numbers.rayleigh=1e5", "--set", f"initial.from={scratch.path('branch')}")
    there, direct = float(asked[2]["velocity_rms"]), summary(scratch.path("end"))["velocity_rms"]
    assert abs(there / direct - 1) < 1e-8, (there, direct)


def along_on_three_ranks(scratch):
    few = runs.settings(grid__radial=16, grid__lateral=16, output__pictures="false", output__report="false")
    for name, ranks in (("even", 1), ("even_three", 3)):
        settle(scratch, name, *few, "--along", "heat.uniform=0:2:3", ranks=ranks)
    one, three = (table(scratch.path(name), "branch.csv") for name in ("even", "even_three"))
    assert [row["parameter"] for row in one if row["asked_for"] == "1"] == ["0", "1", "2"]
    assert len(one) == len(three) and all(row["growth"] == "nan" for row in one)
    for a, b in zip(one, three):
        for name in ("parameter", "nusselt_outer", "velocity_rms", "heat_flow_inner"):
            assert abs(float(a[name]) - float(b[name])) <= 1e-10 * abs(float(a[name])), (name, a, b)


def refusals(scratch):
    def wrong(words, *arguments, code=runs.BAD_INPUT, **options):
        before = runs.files(scratch.name)
        result = runs.expect(runs.run("settle", *arguments, cwd=scratch.name, **options), code)
        assert result.out == "" and len(result.err.splitlines()) == 1, result
        assert result.err.startswith("lidwright: ") and "fault of the program" not in result.err, result
        for word in words:
            assert word in result.err, (word, result)
        assert runs.files(scratch.name) == before, "something was written"

    wrong(["case file", "settle --help"])
    wrong(["missing.toml", "check the path"], "missing.toml")
    wrong(["one", "holds a run", "--overwrite"], "box.toml", "--into", "one")
    wrong(["34 x 128", "halved 2 times", "multiple of 4"], "box.toml", "--error-bars", "--set", "grid.radial=34")
    wrong(["--along and --error-bars"], "box.toml", "--error-bars", "--along", "numbers.rayleigh=1e4:1e5:3")
    wrong(["settle.tolerance = -1"], "box.toml", "--set", "settle.tolerance=-1")
    yielding = "viscosity.yielding.cohesion"
    floor = ["--set", "viscosity.yielding.floor=1"]
    wrong(["box.toml", "[viscosity.yielding]", "march it instead"], "box.toml", "--set", f"{yielding}=9", *floor, ranks=3)
    wrong(["[viscosity.yielding]", "march it instead"], "box.toml", "--along", f"{yielding}=1:2:3", *floor)
    wrong(["initial.from", "another region"], "box.toml", "--set", f"initial.from={scratch.path('annulus')}")
    wrong(["--wander"], "box.toml", "--wander")
    wrong(["8 lateral cells on 3 ranks", "fewer ranks"], "box.toml", *runs.settings(grid__lateral=8), ranks=3)

    def wrong_along(text, *words, **options):
        wrong(["--along", *words], "box.toml", "--along", text, **options)

    for text in ("", "numbers.rayleigh", "numbers.rayleigh=1e4:1e5", "numbers.rayleigh=a:1e5:3"):
        wrong_along(text, "KEY=FROM:TO:COUNT")
    wrong_along("numbers.rayleigh=1e4:1e5:2.5", "KEY=FROM:TO:COUNT")
    wrong_along("numbers.rayleigh=1e4:inf:3", "finite")
    wrong_along("numbers.rayleigh=1e4:1e5:1", "COUNT is 1", "at least 2")
    wrong_along("numbers.rayleigh=1e4:1e4:3", "the same", "--set")
    wrong_along("numbers.rayleigh=1e4:-1e4:3", "numbers.rayleigh = -10000", "at least 0", ranks=3)
    wrong_along("numbers.raylegih=1:2:3", "did you mean 'rayleigh'")
    wrong_along("rayleigh=1:2:3", "did you mean numbers.rayleigh")
    wrong_along("shell.geometry=1:2:3", "shell.geometry", "takes one of")
    wrong_along("initial.modes=1:2:3", "takes a list")
    wrong_along("initial.seed=1:2:3", "takes a whole number")
    wrong_along("grid.radial=32:64:2", "grid.radial", "--error-bars")
    wrong_along("march.end_time=1:2:3", "does not change the steady state")
    wrong_along("shell.radius_ratio=0.4:0.5:3", "shell.radius_ratio", "curved shell")


def help_text(_):
    text = runs.expect(runs.run("settle", "--help"), runs.DONE).out
    for words in ("--along KEY=FROM:TO:COUNT", "--stability", "--error-bars", "--into", "--overwrite", "--set", "Exit codes"):
        assert words in text, words
    assert all(len(line) <= 80 for line in text.splitlines()), text


with runs.Scratch() as scratch_folder:
    scratch_folder.write("box.toml", runs.read(os.path.join(BENCHMARK, "case.toml")))
    for check in (
        published_values_within_error_bars,
        files,
        same_on_three_ranks,
        starts_from_it,
        says_so_when_nothing_convects,
        a_full_circle,
        not_converged,
        interrupted,
        along,
        along_on_three_ranks,
        refusals,
        help_text,
    ):
        check(scratch_folder)
        print(f"{check.__name__}: fine", flush=True)
