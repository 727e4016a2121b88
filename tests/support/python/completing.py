"""What every shell must complete; the shells' own scripts are tests/app/completions*.py."""

import os

import runs

VERBS = ["check", "completions", "figure", "keys", "manual", "march", "onset", "regime", "report", "settle", "verify"]


def script(scratch, shell):
    return scratch.write(f"lidwright.{shell}", runs.expect(runs.run("completions", shell), runs.DONE).out)


def folder(scratch):
    """To complete in: a case, a file that is none, and a folder of runs."""
    where = scratch.path("here")
    os.makedirs(os.path.join(where, "runs", "first"))
    for name in ("mantle.toml", "mantle.csv"):
        open(os.path.join(where, name), "w", encoding="utf-8").close()
    return where


def expect(ask, line, expected):
    answer = ask(line)
    assert answer == sorted(expected), f"'{line}': {answer} instead of {sorted(expected)}"


def check(ask):
    """`ask(line)` gives what the shell offers behind the line, sorted."""
    expect(ask, "lidwright ma", ["manual", "march"])
    assert set(VERBS) <= set(ask("lidwright ")), ask("lidwright ")
    expect(ask, "lidwright march --re", ["--resume", "--resume-from-previous"])
    expect(ask, "lidwright march m", ["mantle.toml"])
    expect(ask, "lidwright check m", ["mantle.toml"])
    expect(ask, "lidwright march mantle.toml --into r", ["runs"])
    expect(ask, "lidwright regime r", ["runs"])
    expect(ask, "lidwright march --set numbers.r", ["numbers.rayleigh="])
    expect(ask, "lidwright settle --set a.b=1 --along grid.l", ["grid.lateral=", "grid.left_refinement="])
    expect(ask, "lidwright figure runs/first --format p", ["pdf", "png"])
    expect(ask, "lidwright figure runs/first --size t", ["two-column"])
    expect(ask, "lidwright figure runs/first te", ["temperature"])
    expect(ask, "lidwright figure runs/first temperature vi", ["viscosity"])
    expect(ask, "lidwright verify steady_b", ["steady_box"])
    expect(ask, "lidwright regime runs/first --threshold mo", ["mobile="])
    expect(ask, "lidwright completions f", ["fish"])
    expect(ask, "lidwright manual se", ["settle"])
    assert "--help" in ask("lidwright --h")
