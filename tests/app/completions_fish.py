"""fish completes by `lidwright completions fish`."""

import os
import shutil
import subprocess
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import completing
import runs


class Fish:
    def __init__(self, script, folder, scratch):
        self.script, self.folder = script, folder
        self.environment = {**os.environ, "HOME": scratch.name, "XDG_CONFIG_HOME": scratch.name}

    def __call__(self, line):
        ask = ["fish", "--no-config", "-c", f"source {self.script}; complete -C '{line}'"]
        answer = subprocess.run(ask, capture_output=True, text=True, check=True, cwd=self.folder, env=self.environment)
        assert answer.stderr == "", answer.stderr
        return sorted({text.split("\t")[0].rstrip("/") for text in answer.stdout.split("\n")[:-1]})


def main():
    if not shutil.which("fish"):
        runs.skip("fish is not here (package fish)")
    with runs.Scratch() as scratch:
        script = completing.script(scratch, "fish")
        subprocess.run(["fish", "-n", script], check=True)
        completing.check(Fish(script, completing.folder(scratch), scratch))


main()
