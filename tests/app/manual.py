"""Manual pages: of the program and of every verb, without a warning of the formatter, and with all that help says."""

import os
import re
import shutil
import subprocess
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import completing
import runs


def formatted(page):
    """The page as plain text, without breaks."""
    environment = {**os.environ, "LC_ALL": "C.UTF-8", "MANWIDTH": "80", "MANROFFOPT": "-rHY=0"}
    shown = subprocess.run(["man", "--warnings", "-P", "cat", "-l", page], capture_output=True, text=True, env=environment, check=True)
    assert shown.stderr == "", shown.stderr
    wide = [line for line in shown.stdout.splitlines() if len(line) > 80]
    assert not wide, wide
    return " ".join(re.sub(".\b", "", shown.stdout).split())


def help_of(verb):
    return runs.expect(runs.run(verb, "--help"), runs.DONE).out


def check(scratch, verb):
    page = runs.expect(runs.run("manual", *[verb] if verb else []), runs.DONE).out
    name = f"lidwright-{verb}" if verb else "lidwright"
    text = formatted(scratch.write(f"{name}.1", page))
    for section in ("NAME", "SYNOPSIS", "DESCRIPTION", "OPTIONS", "EXIT STATUS"):
        assert f" {section} " in text, (name, section)
    assert f"{name} - " in text, text[:200]
    if not verb:
        assert all(f"lidwright-{v}(1)" in text for v in completing.VERBS), text
        return
    said = help_of(verb)
    for option in re.findall(r"^  (?:-h, )?(--[a-z-]+)", said, re.MULTILINE):
        assert f"{option} " in text, (name, option)
    for code, words in re.findall(r"^  (\d)  (.+)$", said, re.MULTILINE):
        assert f" {code} {words}" in text, (name, code, words)


def main():
    if not shutil.which("man"):
        runs.skip("man is not here (package man-db)")
    with runs.Scratch() as scratch:
        for verb in ["", *completing.VERBS]:
            check(scratch, verb)
    assert runs.run("manual", "nonsense").code == runs.BAD_INPUT


main()
