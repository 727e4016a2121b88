"""Completions are made from the program's own list of options, and bash, when asked, completes by them."""

import os
import shlex
import subprocess
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import completing
import runs

ASK = """
source "$1"; shift
COMP_WORDS=("$@"); COMP_CWORD=$((${#COMP_WORDS[@]} - 1))
_lidwright
printf '%s\\n' "${COMPREPLY[@]}"
"""


class Bash:
    """Answers as bash does: words are parted at = too; the last word is the one to complete."""

    def __init__(self, script, folder):
        self.script, self.folder = script, folder

    def __call__(self, line):
        words = [part for word in shlex.split(line) for part in self.parted(word)] + ([""] if line.endswith(" ") else [])
        ask = ["bash", "-c", ASK, "bash", self.script, *words]
        answer = subprocess.run(ask, capture_output=True, text=True, check=True, cwd=self.folder)
        assert answer.stderr == "", answer.stderr
        return sorted(filter(None, answer.stdout.split("\n")))

    @staticmethod
    def parted(word):
        before, equals, after = word.partition("=")
        return [part for part in (before, equals, after) if part]


def main():
    with runs.Scratch() as scratch:
        script = completing.script(scratch, "bash")
        subprocess.run(["bash", "-n", script], check=True)
        ask = Bash(script, completing.folder(scratch))
        completing.check(ask)
        assert ask("lidwright march --into=r") == ["runs"]
        assert ask("lidwright march --set numbers.rayleigh=") == [] == ask("lidwright march --set numbers.rayleigh=1")
        assert ask("lidwright figure --format=p") == ["pdf", "png"]
        assert ask("lidwright figure --with=lid,ar ru") == ["runs"]  # the run is still to be named
        assert ask("lidwright figure --with=lid,ar") == ["lid,arrows"]
        for word in ("nonsense", ""):
            assert runs.run("completions", *[word] if word else []).code == runs.BAD_INPUT


main()
