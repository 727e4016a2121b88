"""What the program says about itself: help, version and the reference of case keys.

It goes to standard output, leaves with code 0 and fits into 80 columns; docs/case.md is the reference.
"""

import os
import re
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


# Exit codes that each verb can return, besides 0, 1 and 2 (docs/exit_codes.md).
CODES = {
    "check": "3", "march": "345", "settle": "345", "onset": "345", "regime": "", "figure": "4", "report": "4",
    "verify": "3456", "keys": "", "completions": "", "manual": "",
}  # fmt: skip


def help_of_verb(verb, codes):
    text = text_of(verb, "--help")
    expect_narrow(text, verb)
    assert text.startswith(f"Usage: lidwright {verb} ") and not text.endswith("\n\n"), text
    assert re.search(rf"^Examples?:\n  .*lidwright {verb}", text, re.MULTILINE), text
    assert re.findall(r"^  (\d)  \S", text.partition("Exit codes:")[2], re.MULTILINE) == list("012" + codes), text
    return text


def help_texts():
    text = text_of("--help")
    expect_narrow(text, "--help")
    assert text == text_of("-h") and not text.endswith("\n\n")
    listed = re.findall(r"^  (\w+)  +\S", text, re.MULTILINE)
    assert sorted(listed) == sorted(CODES), listed
    assert text_of("march", "-h") == text_of("march", "--help")
    texts = {verb: help_of_verb(verb, codes) for verb, codes in CODES.items()}
    for option in ("--set", "--into", "--resume", "--overwrite", "--resume-from-previous", "--progress", "--no-progress"):
        assert option in texts["march"], option
    for option in ("--set", "--into", "--overwrite", "--along", "--stability", "--error-bars", "--progress", "--no-progress"):
        assert option in texts["settle"], option


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


def wrong_lines():
    """Each in the form of all messages: what it is about, what is wrong, what to do; then where to read on."""
    for line, message in (
        ("", "name a verb: check, march"),
        ("marhc", "'marhc' is not a verb of this program (did you mean 'march'?); it has check, march"),
        ("march --overwirte", "--overwirte: is no option of march (did you mean '--overwrite'?)"),
        ("march a b", "b: is one argument too many; the usage is: lidwright march CASE [OPTIONS], or --resume"),
        ("march --set", "--set: a value is missing; give --set TABLE.KEY=VALUE"),
        ("march --into a --into b c", "--into: is given more than once; give it once"),
        ("march a --resume b", "march: CASE does not go with --resume"),
        ("march a --resume-from-previous", "march: --resume-from-previous needs --resume"),
        ("report a --every soon", "--every soon: must be a number"),
        ("figure a --format gif", "--format: must be one of png, svg, pdf, not 'gif'"),
        ("figure a --with lid,arows", "--with: must be one of flow-lines, arrows, lid, isotherms, not 'arows' (did you mean 'arrows'?)"),
        ("completions", "completions: name a shell"),
        ("manual marhc", "VERB: must be one of check, "),
    ):
        result = runs.expect(runs.run(*line.split()), runs.BAD_INPUT)
        assert result.err.startswith("lidwright: " + message), (line, result)
        verb = line.split()[0] if line and not line.startswith("marhc") else ""
        assert result.err.endswith(f"; see `lidwright {verb + ' ' if verb else ''}--help`\n"), (line, result)


wrong_lines()
