"""What ends a run: a time, a number of steps, the wall clock, the steady state. Each says so and leaves the right code."""

import os
import sys
import tomllib

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

BOX = runs.SETTLING_BOX


def summary(folder):
    return tomllib.loads(runs.read(os.path.join(folder, "summary.toml")))


def march(scratch, name, code, **values):
    folder = scratch.path(name)
    case = scratch.write("box.toml", BOX)
    result = runs.expect(runs.run("march", case, "--into", folder, *runs.settings(**values)), code)
    return folder, result


def at_a_time(scratch):
    folder, _ = march(scratch, "time", runs.DONE, march__end_time=0.0123, output__snapshot_every=0.004)
    h = runs.columns(folder)
    assert h["time"][-1] == 0.0123 and summary(folder)["end"] == "end time reached"
    for wanted in (0.004, 0.008, 0.012):
        assert any(abs(t - wanted) < 1e-15 for t in h["time"]), f"no step ends at the snapshot's time {wanted}"
    assert min(h["time_step"][1:]) > 1e-8, f"a step of {min(h['time_step'][1:])}"
    assert sum(name.endswith(".pvts") for name in runs.files(folder)) == 5


def at_a_number_of_steps(scratch):
    folder, _ = march(scratch, "steps", runs.DONE, march__most_steps=17, output__history_every=5)
    assert runs.columns(folder)["step"] == [0, 5, 10, 15, 17] and summary(folder)["end"] == "number of steps reached"


def when_steady(scratch):
    folder, _ = march(scratch, "steady", runs.DONE, march__end_time=10, march__steady=1e-3)
    h = runs.columns(folder)
    assert summary(folder)["end"] == "steady" and h["time"][-1] < 10
    assert h["temperature_change_rate"][-1] < 1e-3 <= h["temperature_change_rate"][-2]
    nusselt = h["nusselt_inner"][-1], h["nusselt_outer"][-1]
    assert abs(nusselt[0] - nusselt[1]) < 1e-2 and nusselt[0] > 3, nusselt


def by_the_wall_clock(scratch):
    """A limit that has passed after the first steps: stopped with a checkpoint, and resumable."""
    few = {"march__most_steps": 400, "march__end_time": 10, "output__checkpoint_every": 1000}
    whole, _ = march(scratch, "unlimited", runs.DONE, **few)
    folder, result = march(scratch, "clock", runs.INTERRUPTED, march__wall_clock=0.02, **few)
    assert summary(folder)["end"] == "wall-clock limit reached" and "--resume" in result.out, result
    step = runs.last_step(folder)
    assert step < 400 and runs.checkpoints(folder)[-1] == f"step_{step:09d}.h5"
    result = runs.run("march", "--resume", folder, "--set", "march.wall_clock=0")
    runs.expect(result, runs.DONE)
    runs.expect_same_run(folder, whole)


with runs.Scratch() as scratch_folder:
    for check in (at_a_time, at_a_number_of_steps, when_steady, by_the_wall_clock):
        check(scratch_folder)
        print(f"{check.__name__}: fine", flush=True)
