"""What the program says about itself: help, version and the reference of case keys.

It goes to standard output, leaves with code 0 and fits into 80 columns; docs/case.md is the reference.
"""

import os
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs


def text_of(*arguments):
    result = runs.expect(runs.run(*arguments), runs.DONE)
    assert result.err == "", result
    assert result.out.endswith("\n") and result.out.strip(), result
    return result.out


def expect_narrow(text, what):
    wide = [line for line in text.splitlines() if len(line) > 80]
    assert not wide, f"{what}: wider than 80 columns:\n" + "\n".join(wide)


def help_texts():
    for arguments in (["--help"], ["settle", "--help"], ["regime", "--help"], ["march", "--help"], ["keys", "--help"], ["-h"], ["march", "-h"]):
        text = text_of(*arguments)
        expect_narrow(text, " ".join(arguments))
        assert "Exit codes" in text or "exit codes" in text.lower(), text
    for option in ("--set", "--into", "--resume", "--overwrite", "--resume-from-previous", "--progress", "--no-progress"):
        assert option in text, option
    text = text_of("settle", "--help")
    for option in ("--set", "--into", "--overwrite", "--along", "--stability", "--error-bars", "--progress", "--no-progress"):
        assert option in text, option
    for verb in ("march", "settle", "onset", "regime", "verify", "keys"):
        assert verb in text_of("--help")


def version():
    text = text_of("--version")
    assert text.startswith("lidwright ") and len(text.splitlines()) == 1, text


def keys():
    text = text_of("keys")
    expect_narrow(text, "keys")
    for word in ("[numbers]", "[shell]", "radius_ratio", "[march]", "end_time", "checkpoint_every"):
        assert word in text, word
    page = runs.read(os.path.join(runs.SOURCE, "docs", "case.md"))
    assert text_of("keys", "--markdown") == page, "docs/case.md is old: lidwright keys --markdown > docs/case.md"


def several_ranks_speak_once():
    assert runs.expect(runs.run("--version", ranks=2), runs.DONE).out == text_of("--version")


help_texts()
version()
keys()
several_ranks_speak_once()
