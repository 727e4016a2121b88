"""A run that was interrupted and resumed is the run that was not, bit for bit. On one rank; parallel_restart.py: on two."""

import os
import shutil
import signal
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

STEPS = 200


class Restart:
    """The undisturbed run, and others that are to become equal to it."""

    def __init__(self, scratch, ranks):
        self.scratch, self.ranks = scratch, ranks
        self.case = scratch.write("lid.toml", runs.LID)
        self.reference = scratch.path("reference")
        runs.expect(self.march("reference"), runs.DONE)
        assert runs.last_step(self.reference) == STEPS
        factorisations = runs.columns(self.reference)["factorisations"][-1]
        assert 3 < factorisations < STEPS / 3, f"{factorisations}: old factors should matter in this test"

    def arguments(self, name, *more):
        return ["march", self.case, "--into", self.scratch.path(name), *more]

    def march(self, name, *more):
        return runs.run(*self.arguments(name, *more), ranks=self.ranks)

    def resume(self, name, *more):
        return runs.run("march", "--resume", self.scratch.path(name), *more, ranks=self.ranks)

    def expect_same(self, name):
        folder = self.scratch.path(name)
        runs.expect_same_run(folder, self.reference)
        runs.expect_no_leftovers(folder)
        assert runs.checkpoints(folder) == runs.checkpoints(self.reference)

    def stopped_by(self, which, name, step, *more):
        """Sends a signal to the program itself once the history has reached a step; its result."""
        folder = self.scratch.path(name)
        process = runs.start(*self.arguments(name, *more), ranks=self.ranks)
        assert runs.wait_for_step(process, folder, step), f"ended before step {step}: {runs.finished(process)}"
        os.kill(program_of(process, self.ranks), which)
        return runs.finished(process)


def program_of(process, ranks):
    """One process of the program: under mpirun, a child of it. Any rank may be asked to stop."""
    if ranks == 1:
        return process.pid
    children = runs.read(f"/proc/{process.pid}/task/{process.pid}/children").split()
    return int(children[-1])


def expect_interrupted(result, folder):
    runs.expect(result, runs.INTERRUPTED)
    step = runs.last_step(folder)
    assert 0 < step < STEPS, f"stopped at step {step}"
    assert runs.checkpoints(folder)[-1] == f"step_{step:09d}.h5", "the checkpoint is of the last step"
    assert "interrupted" in result.out and "--resume" in result.out, result
    runs.expect_no_leftovers(folder)
    return step


def signals(restart):
    """SIGTERM, resumed, then SIGINT, resumed to the end."""
    folder = restart.scratch.path("signals")
    first = expect_interrupted(restart.stopped_by(signal.SIGTERM, "signals", 50), folder)
    process = runs.start("march", "--resume", folder, ranks=restart.ranks)
    assert runs.wait_for_step(process, folder, first + 50)
    os.kill(program_of(process, restart.ranks), signal.SIGINT)
    second = expect_interrupted(runs.finished(process), folder)
    runs.expect(restart.resume("signals"), runs.DONE)
    restart.expect_same("signals")
    sessions = runs.read(os.path.join(folder, "provenance.toml"))
    assert sessions.count("[[session]]") == 3 and sessions.count("interrupted") == 2, sessions
    print(f"stopped at steps {first} and {second}: the same run")


def stopped_at_once(restart):
    """A signal right at the start: the first state is there, and the run goes on from it."""
    folder = restart.scratch.path("at_once")
    result = restart.stopped_by(signal.SIGTERM, "at_once", 0)
    runs.expect(result, runs.INTERRUPTED)
    runs.expect(restart.resume("at_once"), runs.DONE)
    restart.expect_same("at_once")
    assert runs.checkpoints(folder)


def killed(restart, name):
    """A folder as kill -9 left it somewhere past step 110."""
    folder = restart.scratch.path(name)
    process = runs.start(*restart.arguments(name))
    assert runs.wait_for_step(process, folder, 110)
    process.kill()
    runs.finished(process)
    return folder


def damaged_newest_checkpoint(restart):
    """Refused with the remedy; the remedy works."""
    folder = killed(restart, "damaged")
    newest = os.path.join(folder, "checkpoints", runs.checkpoints(folder)[-1])
    os.truncate(newest, os.path.getsize(newest) // 2)
    before = runs.timeless(folder)
    refused = runs.expect(restart.resume("damaged"), runs.BAD_INPUT)
    assert newest in refused.err and "truncated" in refused.err and "--resume-from-previous" in refused.err, refused
    assert runs.timeless(folder) == before and os.path.isfile(newest)
    runs.expect(restart.resume("damaged", "--resume-from-previous"), runs.DONE)
    restart.expect_same("damaged")


def torn_history(restart):
    """A last row that was torn by a crash, and rows after the checkpoint, are dropped."""
    folder = killed(restart, "torn")
    with open(os.path.join(folder, "history.csv"), "a", encoding="utf-8") as file:
        file.write("999999,0.5,0.1")
    runs.expect(restart.resume("torn"), runs.DONE)
    restart.expect_same("torn")


def finished_run(restart):
    """Resuming what is finished changes no result."""
    runs.copy(restart.reference, restart.scratch.path("finished"))
    runs.expect(restart.resume("finished"), runs.DONE)
    restart.expect_same("finished")


def extended(restart):
    """A run that ended at fewer steps and is told to go on is the longer run, but for the snapshot of its first end."""
    runs.expect(restart.march("extended", "--set", f"march.most_steps={STEPS // 2}"), runs.DONE)
    refused = restart.resume("extended", "--set", "numbers.rayleigh=2e6")
    runs.expect(refused, runs.BAD_INPUT)
    runs.expect(restart.resume("extended", "--set", f"march.most_steps={STEPS}"), runs.DONE)
    folder = restart.scratch.path("extended")
    assert runs.timeless(folder) == runs.timeless(restart.reference)
    assert f"most_steps = {STEPS}" in runs.read(os.path.join(folder, "case_as_read.toml"))


def extended_in_time(restart):
    few = ["--set", "march.end_time=0.002", "--set", "march.most_steps=0"]
    runs.expect(restart.march("longer", *few), runs.DONE)
    folder = restart.scratch.path("longer")
    assert runs.columns(folder)["time"][-1] == 0.002
    steps = runs.last_step(folder)
    runs.expect(restart.resume("longer", "--set", "march.end_time=0.003"), runs.DONE)
    assert runs.columns(folder)["time"][-1] == 0.003 and runs.last_step(folder) > steps


def sparse_history(restart):
    """With a row every 7 steps the last step has its row, and resuming at the end does not write it twice."""
    few = ["--set", "march.most_steps=40", "--set", "output.history_every=7", "--set", "output.checkpoint_every=8"]
    runs.expect(restart.march("sparse", *few), runs.DONE)
    folder = restart.scratch.path("sparse")
    assert runs.columns(folder)["step"] == [0, 7, 14, 21, 28, 35, 40]
    before = runs.timeless(folder)
    runs.expect(restart.resume("sparse"), runs.DONE)
    assert runs.timeless(folder) == before


def moved_folder(restart):
    """A run folder may be moved and resumed elsewhere."""
    folder = killed(restart, "before_moving")
    shutil.move(folder, restart.scratch.path("moved"))
    runs.expect(restart.resume("moved"), runs.DONE)
    restart.expect_same("moved")


def pictures(restart):
    """Pictures show the history so far: they, too, are those of the undisturbed run."""
    few = runs.settings(march__most_steps=40, output__snapshot_every=5e-4, output__pictures="true")
    runs.expect(restart.march("drawn", *few), runs.DONE)
    runs.expect(restart.stopped_by(signal.SIGTERM, "drawn_later", 15, *few), runs.INTERRUPTED)
    runs.expect(restart.resume("drawn_later"), runs.DONE)
    drawn = restart.scratch.path("drawn")
    runs.expect_same_run(restart.scratch.path("drawn_later"), drawn)
    assert sum(name.endswith(".png") for name in runs.results(drawn)) > 2


def main():
    with runs.Scratch() as scratch:
        restart = Restart(scratch, ranks=1)
        for check in (
            signals,
            stopped_at_once,
            damaged_newest_checkpoint,
            torn_history,
            finished_run,
            extended,
            extended_in_time,
            sparse_history,
            moved_folder,
            pictures,
        ):
            check(restart)
            print(f"{check.__name__}: fine", flush=True)


if __name__ == "__main__":
    main()
