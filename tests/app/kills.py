"""kill -9 at random moments, resumed until the run is done: the same history and snapshots as an undisturbed run.

The moments are drawn anew each time; the seed is printed, and LIDWRIGHT_SEED repeats it (the machine's load does not repeat,
so the very same moments are not promised). Nothing depends on where a kill falls: too late, and the run is done.
"""

import os
import random
import sys
import time

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

KILLS, LONG_KILLS = 6, 40
MOST_SESSIONS = 300

# Much of the time goes into files, so that many kills fall into their writing.
CASE = runs.LID.replace("most_steps = 200", "most_steps = 80").replace(
    "checkpoint_every = 20\nsnapshot_every = 0.002", "checkpoint_every = 3\nsnapshot_every = 0.0003"
)


def check_readable(folder):
    """After every kill, whatever stands under its final name is whole."""
    for name in runs.files(folder):
        path = os.path.join(folder, name)
        if name.endswith((".vts", ".vtp", ".pvts", ".pvd")):
            assert runs.read(path).rstrip().endswith("</VTKFile>"), path
        if name.endswith(".toml"):
            assert runs.read(path).endswith("\n"), path
        if name.endswith(".h5"):
            with open(path, "rb") as file:
                head = file.read(512)
            expected = int(head.split(b"bytes ")[1].split()[0])
            assert os.path.getsize(path) == 512 + expected, path


class Killer:
    def __init__(self, scratch, random_numbers):
        self.random = random_numbers
        self.case = scratch.write("lid.toml", CASE)
        self.reference = scratch.path("reference")
        began = time.monotonic()
        runs.expect(runs.run("march", self.case, "--into", self.reference), runs.DONE)
        self.undisturbed = self.whole = time.monotonic() - began
        self.kills = self.restarts = 0

    def session(self, folder, arguments):
        """One session that may be killed; is the run done?"""
        process = runs.start(*arguments)
        moment = self.random.uniform(0, self.whole)
        deadline = time.monotonic() + moment
        while process.poll() is None and time.monotonic() < deadline:
            time.sleep(0.001)
        if process.poll() is None:
            process.kill()
            self.kills += 1
        result = runs.finished(process)
        # A machine that has become busier since the undisturbed run would never get anywhere.
        self.whole *= 1.02
        if result.code == runs.DONE:
            return True
        if result.code > 0:
            self.expect_no_checkpoint_yet(result, folder)
        return False

    def expect_no_checkpoint_yet(self, result, folder):
        """The one refusal that is right: killed before there was anything to resume from."""
        runs.expect(result, runs.BAD_INPUT)
        assert not runs.checkpoints(folder) and ("--overwrite" in result.err or "holds no run" in result.err), result
        self.restarts += 1

    def run_through(self, folder):
        self.whole = self.undisturbed
        anew = ["march", self.case, "--into", folder, "--overwrite"]
        arguments = anew
        for _ in range(MOST_SESSIONS):
            if self.session(folder, arguments):
                break
            check_readable(folder)
            arguments = ["march", "--resume", folder] if runs.checkpoints(folder) else anew
        else:
            raise AssertionError(f"not done after {MOST_SESSIONS} sessions")
        runs.expect_same_run(folder, self.reference)
        runs.expect_no_leftovers(folder)
        assert runs.checkpoints(folder) == runs.checkpoints(self.reference)


def main(kills):
    seed = int(os.environ.get("LIDWRIGHT_SEED", random.SystemRandom().randrange(10**9)))
    print(f"seed {seed}", flush=True)
    with runs.Scratch() as scratch:
        killer = Killer(scratch, random.Random(seed))
        rounds = 0
        while killer.kills < kills:
            rounds += 1
            killer.run_through(scratch.path(f"killed_{rounds}"))
        print(f"{killer.kills} kills in {rounds} runs ({killer.restarts} before the first checkpoint): the same run")


if __name__ == "__main__":
    main(KILLS)
