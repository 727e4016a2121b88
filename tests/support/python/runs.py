"""What the scripts of tests/app share: starting the program, reading what it wrote, and a small case.

The scripts are called by ctest with the path of the program; by hand:  /usr/bin/python3 SCRIPT PROGRAM
"""

import hashlib
import os
import re
import shutil
import subprocess
import sys
import tempfile
import time

PROGRAM = os.path.abspath(sys.argv[1] if len(sys.argv) > 1 else os.environ["LIDWRIGHT_PROGRAM"])
SOURCE = os.environ.get(
    "LIDWRIGHT_SOURCE_DIR", os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "..", "..")
)

DONE, FAULT, BAD_INPUT, NOT_SOLVED, NOT_WRITTEN, INTERRUPTED = range(6)  # app/exit_code.hpp

# What ctest sets, so that a script called by hand behaves the same.
ENVIRONMENT = {
    "OMP_NUM_THREADS": "1",
    "OPENBLAS_NUM_THREADS": "1",
    "OMPI_MCA_ess_singleton_isolated": "1",  # one rank starts without a daemon beside it: in half the time
    "OMPI_ALLOW_RUN_AS_ROOT": "1",
    "OMPI_ALLOW_RUN_AS_ROOT_CONFIRM": "1",
    "OMPI_MCA_rmaps_base_oversubscribe": "1",
    "OMPI_MCA_hwloc_base_binding_policy": "none",
    "OMPI_MCA_btl_vader_single_copy_mechanism": "none",
    **os.environ,
}

# A stagnant lid on a coarse grid: the viscosity changes by 1e4 and with every step, so that a run keeps an old
# factor for some steps and then makes a new one. A resumed run has to find its way back into that rhythm.
LID = """\
title = "a small stagnant lid"
[numbers]
rayleigh = 1e6
[shell]
geometry = "spherical-annulus"
radius_ratio = 0.55
[grid]
radial = 16
lateral = 64
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
[viscosity.exponential]
thermal_contrast = 1e4
unity_at = 1
[initial]
base = "boundary-layers"
interior = 0.8
modes = [{ lateral = 4, radial = 1, amplitude = 0.03 }]
noise = 0.01
[march]
end_time = 1
most_steps = 200
[output]
pictures = false
report = false
checkpoint_every = 20
snapshot_every = 0.002
"""

# Convection that becomes steady in some hundred steps.
SETTLING_BOX = """\
[numbers]
rayleigh = 2e4
[shell]
geometry = "box"
[grid]
radial = 12
lateral = 12
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
[initial]
modes = [{ lateral = 1, amplitude = 0.1 }]
"""


class Result:
    def __init__(self, code, out, err):
        self.code, self.out, self.err = code, out, err

    def __repr__(self):
        return f"exit code {self.code}\n--- stdout\n{self.out}\n--- stderr\n{self.err}\n---"


def command(arguments, ranks=1):
    launcher = ["mpirun", "-q", "-np", str(ranks)] if ranks > 1 else []
    return launcher + [PROGRAM, *arguments]


def start(*arguments, ranks=1, stderr=subprocess.PIPE, **options):
    """The running program, which the caller waits for."""
    environment = {**ENVIRONMENT, **options.pop("environment", {})}
    return subprocess.Popen(
        command(arguments, ranks), stdout=subprocess.PIPE, stderr=stderr, text=True, env=environment, **options
    )


def finished(process, timeout=240):
    try:
        out, err = process.communicate(timeout=timeout)
    except subprocess.TimeoutExpired:
        process.kill()
        out, err = process.communicate()
        raise AssertionError(f"did not end within {timeout} s\n{out}\n{err}") from None
    return Result(process.returncode, out, err)


def run(*arguments, timeout=240, **options):
    return finished(start(*arguments, **options), timeout)


def expect(result, code):
    assert result.code == code, f"expected exit code {code}, got {result}"
    return result


class Scratch(tempfile.TemporaryDirectory):
    """A temporary folder; `path("a", "b")` is a path in it, `write` makes a file."""

    def path(self, *names):
        return os.path.join(self.name, *names)

    def write(self, name, text):
        with open(self.path(name), "w", encoding="utf-8") as file:
            file.write(text)
        return self.path(name)

    def __enter__(self):
        return self


def settings(**values):
    """settings(march__end_time=0.1) -> ["--set", "march.end_time=0.1"]"""
    return [word for key, value in values.items() for word in ("--set", f"{key.replace('__', '.')}={value}")]


def read(path):
    with open(path, encoding="utf-8") as file:
        return file.read()


def rows(folder):
    """The history's rows as text; the first is the line of names."""
    return [line for line in read(os.path.join(folder, "history.csv")).splitlines() if not line.startswith("#")]


def timeless(folder):
    """The history without its last column, wall_time, in which equal runs differ."""
    names, *lines = rows(folder)
    assert names.endswith(",wall_time"), names
    return [names.rpartition(",")[0]] + [line.rpartition(",")[0] for line in lines]


def columns(folder):
    """The history as lists of numbers by name."""
    names, *lines = rows(folder)
    table = [[float(word) for word in line.split(",")] for line in lines]
    assert all(len(row) == len(names.split(",")) for row in table)
    return {name: [row[k] for row in table] for k, name in enumerate(names.split(","))}


def last_step(folder):
    """Step of the history's last whole row, -1 while there is none."""
    try:
        text = read(os.path.join(folder, "history.csv"))
    except OSError:
        return -1
    steps = re.findall(r"^(\d+),.*\n", text, re.MULTILINE)
    return int(steps[-1]) if steps else -1


def wait_for_step(process, folder, step, timeout=200):
    """Waits until the history has reached `step`, or the process has ended; says which."""
    deadline = time.monotonic() + timeout
    while process.poll() is None:
        if last_step(folder) >= step:
            return True
        assert time.monotonic() < deadline, f"step {step} was not reached within {timeout} s"
        time.sleep(0.005)
    return False


def files(folder):
    """All files below a folder, relative to it."""
    found = [os.path.relpath(os.path.join(where, name), folder) for where, _, names in os.walk(folder) for name in names]
    return sorted(found)


def digest(path):
    with open(path, "rb") as file:
        return hashlib.sha256(file.read()).hexdigest()


def results(folder):
    """Everything by which two runs are compared, but for the history: name -> digest."""
    kinds = ("fields", "walls", "profiles", "pictures")
    return {name: digest(os.path.join(folder, name)) for name in files(folder) if name.startswith(kinds)}


def checkpoints(folder):
    """Names of the checkpoints, the newest last."""
    where = os.path.join(folder, "checkpoints")
    return sorted(name for name in os.listdir(where) if name.endswith(".h5")) if os.path.isdir(where) else []


def expect_same_run(folder, reference):
    """History equal byte for byte but for the clock, and all snapshots byte for byte."""
    here, there = timeless(folder), timeless(reference)
    different = [(a, b) for a, b in zip(here, there) if a != b]
    assert not different, f"first rows that differ:\n{different[0][0]}\n{different[0][1]}"
    assert len(here) == len(there), f"{len(here)} rows instead of {len(there)}"
    a, b = results(folder), results(reference)
    assert sorted(a) == sorted(b), f"snapshots: {sorted(set(a) ^ set(b))} are in one run only"
    assert a == b, f"different contents: {[name for name in a if a[name] != b[name]]}"


def expect_no_leftovers(folder):
    left = [name for name in files(folder) if name.endswith(".partial")]
    assert not left, left


def copy(folder, to):
    shutil.rmtree(to, ignore_errors=True)
    shutil.copytree(folder, to)
    return to


def skip(why):
    print(f"skipped: {why}")
    sys.exit(77)
