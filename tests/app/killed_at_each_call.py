"""Killed right before the n-th change of a file, and once more while it resumes: in the end the run that was not killed.

kills.py draws its moments; here they are known, and long_killed_at_each_call.py goes through all of them. A library of our
own, preloaded into the program, kills it (tests/support/die_at_call.c).
"""

import os
import shutil
import subprocess
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import kills
import runs

KILLED = -9
SAMPLES = 12

CASE = runs.LID.replace("radial = 16\nlateral = 64", "radial = 6\nlateral = 16").replace(
    "most_steps = 200", "most_steps = 8"
).replace("checkpoint_every = 20\nsnapshot_every = 0.002", "checkpoint_every = 2\nhistory_every = 3\nsnapshot_every = 3e-6")


class Calls:
    def __init__(self, scratch):
        compiler = shutil.which("cc")
        if not compiler:
            runs.skip("no compiler for the library to preload")
        self.library = scratch.path("die_at_call.so")
        source = os.path.join(runs.SOURCE, "tests", "support", "die_at_call.c")
        subprocess.run([compiler, "-shared", "-fPIC", "-o", self.library, source, "-ldl"], check=True)
        self.case = scratch.write("lid.toml", CASE)
        self.scratch = scratch
        self.reference = scratch.path("reference")
        self.all = self.count(["march", self.case, "--into", self.reference], self.reference)

    def preloaded(self, arguments, folder, **more):
        environment = {"LD_PRELOAD": self.library, "LIDWRIGHT_BELOW": folder, **more}
        return runs.run(*arguments, environment=environment)

    def count(self, arguments, folder):
        """Number of changes of files in a whole session."""
        number = self.scratch.path("number")
        runs.expect(self.preloaded(arguments, folder, LIDWRIGHT_COUNT=number), runs.DONE)
        return int(runs.read(number))

    def killed_at(self, call, arguments, folder):
        """Was there such a call? False: the session came to its end."""
        result = self.preloaded(arguments, folder, LIDWRIGHT_LAST_CALL=str(call))
        assert result.code in (KILLED, runs.DONE), result
        kills.check_readable(folder)
        return result.code == KILLED

    def arguments(self, folder):
        anew = ["march", self.case, "--into", folder, "--overwrite"]
        return ["march", "--resume", folder] if runs.checkpoints(folder) else anew

    def check(self, first, second):
        """Killed before change number `first`, then before number `second` of the next session."""
        folder = self.scratch.path(f"killed_{first}_{second}")
        assert self.killed_at(first, self.arguments(folder), folder), f"there is no call {first}"
        assert os.path.isdir(folder) or first == 1
        self.killed_at(second, self.arguments(folder), folder)
        runs.expect(runs.run(*self.arguments(folder)), runs.DONE)
        try:
            runs.expect_same_run(folder, self.reference)
            runs.expect_no_leftovers(folder)
            assert runs.checkpoints(folder) == runs.checkpoints(self.reference)
        except AssertionError as error:
            raise AssertionError(f"killed before call {first}, then before call {second}: {error}") from error
        shutil.rmtree(folder)


def main(stride_of):
    with runs.Scratch() as scratch:
        calls = Calls(scratch)
        assert calls.all > 100, f"only {calls.all} changes of files were seen"
        stride = stride_of(calls.all)
        checked = range(1, calls.all + 1, stride)
        for n, call in enumerate(checked):
            calls.check(call, 1 + 7 * n % 60)
        print(f"killed before {len(checked)} of {calls.all} changes of files: the same run each time")


if __name__ == "__main__":
    main(lambda calls: calls // SAMPLES)
