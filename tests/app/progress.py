"""Progress on standard error: lines for a file, one rewritten line at a terminal, nothing when not wanted."""

import os
import pty
import re
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

CASE = runs.LID.replace("most_steps = 200", "most_steps = 80")
LINE = re.compile(r" *\d+ %  step \d+  time \S+  Nu \S+ outer, \S+ inner  v_rms \S+  ends in (.+)")


def lines_in_a_file(case, folder):
    result = runs.expect(runs.run("march", case, "--into", folder, "--overwrite", "--progress"), runs.DONE)
    assert "\r" not in result.err and "\033" not in result.err, result
    lines = result.err.splitlines()
    assert lines and all(LINE.fullmatch(line) for line in lines), result
    assert "Nusselt number" in result.out and "ends in" not in result.out


def nothing_unless_wanted(case, folder):
    for more in ([], ["--no-progress"]):
        result = runs.expect(runs.run("march", case, "--into", folder, "--overwrite", *more), runs.DONE)
        assert result.err == "", result


def at_a_terminal(case, folder, *more):
    """What a terminal gets on standard error."""
    here, there = pty.openpty()
    process = runs.start("march", case, "--into", folder, "--overwrite", *more, stderr=there)
    os.close(there)
    shown = b""
    while True:
        try:
            part = os.read(here, 4096)
        except OSError:  # the program has closed its end
            break
        if not part:
            break
        shown += part
    os.close(here)
    runs.expect(runs.finished(process), runs.DONE)
    return shown.decode()


def one_line_at_a_terminal(case, folder):
    shown = at_a_terminal(case, folder)
    assert "\n" not in shown, f"more than one line: {shown!r}"
    pictures = [part for part in shown.split("\r\033[K") if part]
    assert pictures and all(LINE.fullmatch(part) for part in pictures), repr(shown)
    assert shown.endswith("\r\033[K"), "the line is taken away at the end"
    assert all(len(part) <= 100 for part in pictures), pictures
    assert at_a_terminal(case, folder, "--no-progress") == ""


def forecast(case, folder):
    """Once something is done, the end is foreseen."""
    shown = at_a_terminal(case, folder, "--set", "march.most_steps=300")
    ends = [match.group(1) for match in map(LINE.fullmatch, shown.split("\r\033[K")) if match]
    assert any(re.fullmatch(r"\d+ s|\d+ min \d\d s|\d+ h \d\d min", end) for end in ends), ends


with runs.Scratch() as scratch:
    lid, run_folder = scratch.write("lid.toml", CASE), scratch.path("run")
    for check in (lines_in_a_file, nothing_unless_wanted, one_line_at_a_terminal, forecast):
        check(lid, run_folder)
