"""`lidwright verify`: its list, its table, its exit codes. The numbers themselves: tests/benchmarks.

Called by ctest with the path of the program.
"""

import csv
import os
import shutil
import signal
import subprocess
import sys
import tempfile
import time

PROGRAM = os.path.abspath(sys.argv[1])
SOURCE = os.environ.get("LIDWRIGHT_SOURCE_DIR") or os.path.join(os.path.dirname(__file__), "..", "..")
OWN = os.path.join(SOURCE, "benchmarks", "physics")
DONE, BAD_INPUT, NOT_WRITTEN, INTERRUPTED, DISAGREES = 0, 2, 4, 5, 6  # app/exit_code.hpp
FLOW = "stokes_viscosity_step"


def run(*arguments, code=DONE):
    done = subprocess.run([PROGRAM, "verify", *arguments], capture_output=True, text=True)
    if done.returncode != code:
        raise SystemExit(f"verify {arguments}: code {done.returncode}, not {code}\n{done.stdout}{done.stderr}")
    return done


def table(path):
    with open(path) as file:
        return list(csv.DictReader(line for line in file if not line.startswith("#")))


def lists_all_benchmarks():
    shown = run("--list").stdout
    for name in os.listdir(OWN):
        assert name in shown, name
        assert os.path.exists(os.path.join(OWN, name, "README.md")), name


def writes_its_table(into):
    path = os.path.join(into, "table.csv")
    shown = run(FLOW, "--csv", path).stdout
    rows = table(path)
    assert len(rows) == 14 and all(r["verdict"] == "agrees" for r in rows), rows
    assert "14 of 14 (100.0 %) values agree" in shown, shown


def refuses_bad_input(into):
    assert "did you mean 'stokes_annulus'?" in run("stokes_anulus", code=BAD_INPUT).stderr
    assert "holds no benchmarks" in run("--from", into, code=BAD_INPUT).stderr
    run(FLOW, "--csv", os.path.join(into, "no", "such", "folder.csv"), code=NOT_WRITTEN)


def tells_when_a_value_differs(into):
    copy = os.path.join(into, "spoilt", FLOW)
    shutil.copytree(os.path.join(OWN, FLOW), copy)
    path = os.path.join(copy, "expected.csv")
    with open(path) as file:
        text = file.read()
    with open(path, "w") as file:  # a velocity that is off by 0.7 %
        file.write(text.replace("0.025330295910584444,", "0.0255,", 1))
    shown = run("--from", os.path.dirname(copy), code=DISAGREES).stdout
    assert "DIFFERS" in shown and "1 differ" in shown, shown


def stops_when_asked(into):
    path = os.path.join(into, "stopped.csv")
    # A benchmark that takes minutes.
    started = subprocess.Popen(
        [PROGRAM, "verify", FLOW, "blankenbach_1989_3", "--csv", path], stdout=subprocess.PIPE, text=True
    )
    while not (os.path.exists(path) and len(table(path)) == 14):
        assert started.poll() is None
        time.sleep(0.1)
    time.sleep(1)
    started.send_signal(signal.SIGINT)
    shown, _ = started.communicate(timeout=60)
    assert started.returncode == INTERRUPTED, started.returncode
    assert "stopped" in shown and "14 of 14" in shown, shown
    assert len(table(path)) == 14


def main():
    lists_all_benchmarks()
    with tempfile.TemporaryDirectory() as into:
        writes_its_table(into)
        refuses_bad_input(into)
        tells_when_a_value_differs(into)
        stops_when_asked(into)


main()
