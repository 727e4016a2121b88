"""`lidwright onset`: what it prints and writes, on one rank and two, what it refuses, and Ctrl-C."""

import csv
import os
import signal
import sys
import time
import tomllib

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

SHELL = """\
title = "a plain annulus"
[numbers]
rayleigh = 1e4
[shell]
geometry = "annulus"
radius_ratio = 0.55
[grid]
radial = 48
lateral = 192
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
"""
CRITICAL, MODE = 672.0214595, 4  # tests/reference/onset_expvisc.csv, annulus, contrast 1, free walls


def onset(scratch, into, *more, code=runs.DONE, **options):
    arguments = ["onset", scratch.path("shell.toml"), "--into", scratch.path(into), *more]
    return runs.expect(runs.run(*arguments, **options), code)


def table(folder):
    lines = [line for line in runs.read(os.path.join(folder, "onset.csv")).splitlines() if not line.startswith("#")]
    return [{name: float(word) for name, word in row.items()} for row in csv.DictReader(lines)]


def summary(folder):
    return tomllib.loads(runs.read(os.path.join(folder, "summary.toml")))


def finds_it(scratch):
    result = onset(scratch, "found")
    assert result.err == "", result
    rows, found = table(scratch.path("found")), summary(scratch.path("found"))
    critical = [row for row in rows if row["critical"]]
    assert len(critical) == 1 and critical[0]["mode"] == MODE, rows
    assert abs(critical[0]["rayleigh"] / CRITICAL - 1) < 1e-4, critical
    assert abs(critical[0]["rayleigh"] - CRITICAL) < critical[0]["error"] < 0.01 * CRITICAL
    assert rows[0]["mode"] == 1 and rows[-1]["rayleigh"] > 3 * critical[0]["rayleigh"]
    assert found["critical_mode"] == MODE and found["bracketed"] == 1 and found["end"] == "complete"
    for words in ("a plain annulus", "4 waves round the circle", "14.88 times critical: it convects"):
        assert words in result.out, (words, result)
    written = runs.files(scratch.path("found"))
    for name in ("onset.png", "report.html", "fields.pvd", "fields/fields_0000.pvts", "case_as_read.toml", "provenance.toml"):
        assert name in written, written


def same_on_two_ranks(scratch):
    onset(scratch, "two", ranks=2)
    for name in ("onset.csv", "onset.png", "summary.toml"):
        one, two = (runs.digest(scratch.path(folder, name)) for folder in ("found", "two"))
        assert one == two, name


def options(scratch):
    onset(scratch, "few", "--modes", "3:5", "--no-error-bars")
    rows = table(scratch.path("few"))
    assert [row["mode"] for row in rows] == [3, 4, 5] and all(row["error"] == 0 for row in rows)
    end = onset(scratch, "end", "--modes", "1:2")
    assert "--modes" in end.out and summary(scratch.path("end"))["bracketed"] == 0, end
    quiet = onset(scratch, "quiet", "--set", "numbers.rayleigh=500", "--set", "output.pictures=false")
    assert "it conducts" in quiet.out and "onset.png" not in runs.files(scratch.path("quiet"))
    assert table(scratch.path("quiet")) == table(scratch.path("found")), "the case's own Ra counts"
    onset(scratch, "quiet", "--overwrite", "--modes", "4:4")
    assert len(table(scratch.path("quiet"))) == 1


def help_text(_):
    text = runs.expect(runs.run("onset", "--help"), runs.DONE).out
    for words in ("--modes A:B", "--no-error-bars", "--into", "--overwrite", "--set", "numbers.rayleigh", "Exit codes"):
        assert words in text, words
    assert all(len(line) <= 80 for line in text.splitlines()), text


def refusals(scratch):
    def wrong(code, words, *arguments):
        before = runs.files(scratch.name)
        result = runs.expect(runs.run("onset", *arguments, cwd=scratch.name), code)
        assert result.out == "" and len(result.err.splitlines()) == 1, result
        assert result.err.startswith("lidwright: "), result
        for word in words:
            assert word in result.err, (word, result)
        assert runs.files(scratch.name) == before, "something was written"

    bad, case = runs.BAD_INPUT, "shell.toml"
    wrong(bad, ["case file", "onset --help"])
    wrong(bad, ["missing.toml", "check the path"], "missing.toml")
    wrong(bad, ["found", "holds a run", "--overwrite"], case, "--into", "found")
    creep = ["--set", "viscosity.dislocation.reference_stress=9"]
    wrong(bad, [case, "[viscosity.dislocation]", "remove the table"], case, *creep)
    yielding = ["--set", "viscosity.yielding.cohesion=9", "--set", "viscosity.yielding.floor=1"]
    wrong(bad, ["[viscosity.yielding]", "remove the table"], case, *yielding)
    wrong(bad, ["grid.radial = 28", ">= 32", "--no-error-bars"], case, "--set", "grid.radial=28")
    wrong(bad, ["grid.radial = 6", ">= 8"], case, "--set", "grid.radial=6", "--no-error-bars")
    for modes in ("3", "3:", ":3", "0:3", "5:3", "a:b", "1:2:3", "-1:4", "1:99999"):
        wrong(bad, [f"--modes {modes}", "A <= B"], case, f"--modes={modes}")
    wrong(bad, ["--wander"], case, "--wander")
    wrong(runs.NOT_SOLVED, ["mode 900", "grid.radial"], case, "--modes=900:901")
    upside_down = ["--set", "walls.inner.temperature=0", "--set", "walls.outer.temperature=1"]
    wrong(runs.NOT_SOLVED, ["no Rayleigh number", "cool it from above"], case, *upside_down)
    wrong(runs.NOT_SOLVED, ["no Rayleigh number"], case, "--set", "walls.inner.temperature=0")


def interrupted(scratch):
    """What was found is kept."""
    arguments = ["--modes", "1:9999", "--set", "grid.radial=256", "--progress"]
    folder = scratch.path("stopped")
    process = runs.start("onset", scratch.path("shell.toml"), "--into", folder, *arguments)
    time.sleep(3)
    process.send_signal(signal.SIGINT)
    result = runs.expect(runs.finished(process), runs.INTERRUPTED)
    assert "interrupted" in result.out and "mode" in result.err, result
    assert summary(folder)["end"] == "interrupted" and len(table(folder)) >= 1
    runs.expect_no_leftovers(folder)


with runs.Scratch() as scratch_folder:
    scratch_folder.write("shell.toml", SHELL)
    for check in (finds_it, same_on_two_ranks, options, help_text, refusals, interrupted):
        check(scratch_folder)
        print(f"{check.__name__}: fine", flush=True)
