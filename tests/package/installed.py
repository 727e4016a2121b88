"""`cmake --install` into another prefix: the program runs from there, moved, and finds what belongs to it."""

import os
import shutil
import subprocess
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import completing
import runs

BUILD = os.path.dirname(runs.PROGRAM)
SHARED = [
    "bash-completion/completions/lidwright", "zsh/site-functions/_lidwright", "fish/vendor_completions.d/lidwright.fish",
    "doc/lidwright/copyright", "doc/lidwright/changelog.gz", "doc/lidwright/README.md", "doc/lidwright/docs/install.md",
    "lidwright/benchmarks/stokes_annulus/benchmark.toml", "man/man1/lidwright.1.gz",
    *(f"man/man1/lidwright-{verb}.1.gz" for verb in completing.VERBS),
]  # fmt: skip


def main():
    if not os.path.exists(os.path.join(BUILD, "cmake_install.cmake")):
        runs.skip("the program is not in a build folder")
    with runs.Scratch() as scratch:
        install = ["cmake", "--install", BUILD, "--prefix", scratch.path("first")]
        subprocess.run(install, check=True, stdout=subprocess.DEVNULL)
        prefix = shutil.move(scratch.path("first"), scratch.path("moved"))
        missing = [name for name in SHARED if not os.path.getsize(os.path.join(prefix, "share", name))]
        assert not missing, missing
        examples = os.path.join(prefix, "share", "doc", "lidwright", "examples")
        assert sorted(os.listdir(examples)) == sorted(os.listdir(os.path.join(runs.SOURCE, "cases")))
        runs.PROGRAM = os.path.join(prefix, "bin", "lidwright")
        case = os.path.join(examples, "isoviscous_annulus.toml")
        runs.expect(runs.run("march", case, "--set", "march.most_steps=2", "--into", scratch.path("run")), runs.DONE)
        # A benchmark that only the installed folder has: it is this one that is looked at.
        benchmarks = os.path.join(prefix, "share", "lidwright", "benchmarks")
        os.rename(os.path.join(benchmarks, "stokes_annulus"), os.path.join(benchmarks, "renamed"))
        result = runs.expect(runs.run("verify", "renamed"), runs.DONE)
        assert "agrees" in result.out, result
        assert "renamed" in runs.run("completions", "bash").out


main()
