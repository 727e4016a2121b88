"""`lidwright report`: the page of every kind of run, its size and time, what is refused, and --follow."""

import json
import os
import re
import shutil
import signal
import sys
import time

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

MARK = "<!doctype html>\n<!-- lidwright report -->\n"
BOX = """\
title = "a small box"
[numbers]
rayleigh = 1e4
[shell]
geometry = "box"
[grid]
radial = 16
lateral = 16
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
[initial]
modes = [{ lateral = 1, radial = 1, amplitude = 0.1 }]
[output]
pictures = false
"""


def data(path):
    text = runs.read(path)
    assert text.startswith(MARK), text[:80]
    assert "dygraphs is MIT-licenced" in text and "Permission is hereby granted" in text
    assert "sourceMappingURL" not in text and not re.search(r"<(script|link|img)[^>]+(src|href)=.?https?:", text)
    return json.loads(re.search(r'<script type="application/json" id="data">(.*?)</script>', text, re.S).group(1))


def report(*arguments, code=runs.DONE):
    return runs.expect(runs.run("report", *arguments), code)


def of_a_march(scratch):
    short = runs.settings(march__most_steps=30, output__snapshot_every=4e-4)
    runs.expect(runs.run("march", scratch.write("lid.toml", runs.LID), "--into", scratch.path("run"), *short), runs.DONE)
    assert not os.path.exists(scratch.path("run", "report.html")), "output.report = false"
    report(scratch.path("run"))
    page = data(scratch.path("run", "report.html"))
    assert page["kind"] == "march" and not page["running"] and page["history"]["rows"] == 31
    assert page["verdict"]["heading"] and len(page["figures"]) == 8 and "[walls.inner]" in page["case"]
    layers = {layer["name"]: layer for layer in page["fields"]["layers"]}
    assert set(layers) == {"temperature", "viscosity"} and len(layers["viscosity"]["images"]) == len(page["profiles"])
    runs.expect_no_leftovers(scratch.path("run"))


def of_states_and_onset(scratch):
    box = scratch.write("box.toml", BOX)
    runs.expect(runs.run("settle", box, "--into", scratch.path("branch"), "--along", "numbers.rayleigh=1e4:2e4:2"), runs.DONE)
    page = data(scratch.path("branch", "report.html"))
    assert page["kind"] == "settle" and page["parameter"] == "numbers.rayleigh"
    assert page["fields"]["labels"] == ["numbers.rayleigh = 10000", "numbers.rayleigh = 20000"]
    assert {table["file"] for table in page["tables"]} == {"branch.csv", "newton.csv"}
    shells(scratch)
    runs.expect(runs.run("settle", box, "--into", scratch.path("state"), "--error-bars", *runs.settings(grid__radial=32, grid__lateral=32)), runs.DONE)
    page = data(scratch.path("state", "report.html"))
    nusselt = next(f for f in page["figures"] if f["label"] == "Nusselt number, outer wall")
    # Blankenbach et al. (1989), case 1a: 4.884409; the bar holds it.
    assert abs(float(nusselt["number"]["value"]) - 4.884409) <= float(nusselt["number"]["error"]), nusselt
    assert page["verdict"]["heading"] == "steady" and page["health"]["overall"] == "Everything that is judged is good.", page["health"]
    runs.expect(runs.run("onset", box, "--into", scratch.path("onset"), "--modes", "1:3", "--no-error-bars"), runs.DONE)
    page = data(scratch.path("onset", "report.html"))
    assert page["kind"] == "onset" and page["verdict"]["heading"] == "this case convects", page["verdict"]


def shells(scratch):
    """Each state along a key of the shell is shown in a shell of its own."""
    annulus = BOX.replace('"box"', '"annulus"\nradius_ratio = 0.5')
    case, folder = scratch.write("annulus.toml", annulus), scratch.path("ratios")
    runs.expect(runs.run("settle", case, "--into", folder, "--along", "shell.radius_ratio=0.5:0.8:2"), runs.DONE)
    fields = data(scratch.path("ratios", "report.html"))["fields"]
    ends = [(g["radii"][0], g["radii"][-1]) for g in fields["geometries"]]
    assert ends == [(1, 2), (4, 5)], ends
    runs.expect(runs.run("figure", folder, "temperature", "profiles", "--at", "snapshot:1"), runs.DONE)


def the_table(history, path):
    """Its lines have the values of their times."""
    lines = [line.split(",") for line in runs.read(path).splitlines() if not line.startswith("#")]
    names, rows = lines[0], [[float(x) for x in line] for line in lines[1:]]
    by_time = {round(row[names.index("time")], 9): row for row in rows}
    times = [history["times"][place] for place in history["table"]]
    assert len(times) == 60 and times[0] == 0 and times[-1] == rows[-1][names.index("time")], times
    for column in history["columns"]:
        places = [sum(column["steps"][: k + 1]) for k in range(len(column["steps"]))] if column["steps"] else range(len(history["times"]))
        values = dict(zip(places, column["values"]))
        for place, time_there in zip(history["table"], times):
            expected = by_time[round(time_there, 9)][names.index(column["name"])]
            assert abs(values[place] - expected) <= 1e-6 * abs(expected), (column["name"], time_there, values[place], expected)


def long_run(scratch):
    """10,000 rows and 50 snapshots: under 10 s and 3 MB, and every extreme is there."""
    folder = runs.copy(scratch.path("run"), scratch.path("long"))
    folder = scratch.path("long")
    lines = runs.read(os.path.join(folder, "history.csv")).splitlines(keepends=True)
    head = [line for line in lines if line.startswith("#") or line.startswith("step")]
    names, row = head[-1].strip().split(","), lines[-1].strip().split(",")
    at = {name: names.index(name) for name in ("step", "time", "nusselt_outer", "velocity_rms", "plumes")}
    made = []
    for step in range(10000):
        values = [f"{(float(x) if x != 'nan' else 1) * (1 + 1e-3 * ((step * 7919 + k * 104729) % 1000))}" for k, x in enumerate(row)]
        values[at["step"]], values[at["time"]] = str(step), f"{1e-4 * step!r}"
        if step == 7777:
            values[at["nusselt_outer"]] = "77.125"
        made.append(",".join(values) + "\n")
    with open(os.path.join(folder, "history.csv"), "w") as file:
        file.writelines(head + made)
    pvd = runs.read(os.path.join(folder, "fields.pvd"))
    for n in range(1, 50):
        for name in os.listdir(os.path.join(folder, "fields")):
            if name.startswith("fields_0000_"):
                shutil.copy(os.path.join(folder, "fields", name), os.path.join(folder, "fields", name.replace("0000", f"{n:04}", 1)))
        index = runs.read(os.path.join(folder, "fields", "fields_0000.pvts")).replace("fields_0000_", f"fields_{n:04}_")
        with open(os.path.join(folder, "fields", f"fields_{n:04}.pvts"), "w") as file:
            file.write(index)
        shutil.copy(os.path.join(folder, "profiles", "profiles_0000.csv"), os.path.join(folder, "profiles", f"profiles_{n:04}.csv"))
    entry = re.search(r" *<DataSet[^>]*>\n", pvd).group(0)
    entries = "".join(re.sub(r'timestep="[^"]*"', f'timestep="{0.02 * n}"', entry).replace("0000", f"{n:04}") for n in range(50))
    with open(os.path.join(folder, "fields.pvd"), "w") as file:
        file.write(re.sub(r"( *<DataSet[^>]*>\n)+", entries, pvd))
    start = time.monotonic()
    report(folder)
    seconds = time.monotonic() - start
    path = os.path.join(folder, "report.html")
    page = data(path)
    assert seconds < 10 and os.path.getsize(path) < 3e6, (seconds, os.path.getsize(path))
    nusselt = next(c for c in page["history"]["columns"] if c["name"] == "nusselt_outer")
    assert page["history"]["rows"] == 10000 and max(nusselt["values"]) == 77.125 and len(nusselt["values"]) <= 1060
    the_table(page["history"], os.path.join(folder, "history.csv"))
    rows = [sum(nusselt["steps"][: k + 1]) for k in range(len(nusselt["steps"]))]
    assert abs(page["history"]["times"][rows[nusselt["values"].index(77.125)]] - 0.7777) < 1e-12
    assert page["fields"]["total"] == 50 and len(page["fields"]["labels"]) <= 24
    print(f"  {seconds:.1f} s, {os.path.getsize(path) / 1e6:.2f} MB")


def refusals(scratch):
    foreign = scratch.write("mine.html", "<!doctype html>\nmine")
    result = report(scratch.path("run"), "--onto", foreign, code=runs.BAD_INPUT)
    assert foreign in result.err and "--overwrite" in result.err and runs.read(foreign).endswith("mine"), result
    report(scratch.path("run"), "--onto", foreign, "--overwrite")
    report(scratch.path("run"), "--onto", foreign)
    assert data(foreign)["kind"] == "march"
    for wrong, words in (
        ([], "name a run folder"),
        ([scratch.path("nothing")], scratch.path("nothing")),
        ([scratch.path("run"), "--follow", "--every", "0"], "--every 0"),
    ):
        result = report(*wrong, code=runs.BAD_INPUT)
        assert words in result.err and result.err.count("\n") == 1, result
    result = report(scratch.path("run"), "--onto", scratch.path("no", "such", "folder.html"), code=runs.NOT_WRITTEN)
    assert "folder.html" in result.err, result
    kept = runs.copy(scratch.path("run"), scratch.path("kept"))
    with open(scratch.path("kept", "report.html"), "w") as file:
        file.write("my own notes")
    report(scratch.path("kept"), code=runs.BAD_INPUT)
    shutil.rmtree(scratch.path("kept", "fields"))
    report(scratch.path("kept"), "--overwrite")
    page = data(scratch.path("kept", "report.html"))
    assert page["fields"] is None and "fields_" in page["missing"] and page["history"], page["missing"]


def followed(scratch):
    """The page says that the run goes on, grows with it, and stops saying so when it has ended."""
    folder, onto = scratch.path("going"), scratch.path("followed.html")
    march = runs.start("march", scratch.path("lid.toml"), "--into", folder, *runs.settings(march__most_steps=100000))
    runs.wait_for_step(march, folder, 3)
    follower = runs.start("report", folder, "--follow", "--every", "1", "--onto", onto)
    first = page_when(onto, lambda page: page["running"] and page["history"])
    assert first["reload"] == 1, first["reload"]
    page_when(onto, lambda page: page["history"] and page["history"]["rows"] > first["history"]["rows"])
    stopped = runs.start("report", folder, "--follow", "--every", "60", "--onto", scratch.path("stopped.html"))
    page_when(scratch.path("stopped.html"), lambda page: page["running"])
    stopped.send_signal(signal.SIGINT)
    runs.expect(runs.finished(stopped, 20), runs.DONE)
    page = data(scratch.path("stopped.html"))
    assert page["running"] and page["reload"] == 0, "nobody writes it anew"
    march.send_signal(signal.SIGTERM)
    runs.expect(runs.finished(march), runs.INTERRUPTED)
    runs.expect(runs.finished(follower, 20), runs.DONE)
    assert not data(onto)["running"]


def page_when(path, holds, seconds=60):
    end = time.monotonic() + seconds
    while time.monotonic() < end:
        if os.path.exists(path):
            page = data(path)
            if holds(page):
                return page
        time.sleep(0.1)
    raise AssertionError(f"{path} never came to be as wanted")


with runs.Scratch() as scratch_folder:
    for check in (of_a_march, of_states_and_onset, long_run, refusals, followed):
        check(scratch_folder)
        print(f"{check.__name__}: fine", flush=True)
