"""`lidwright check`: bad input, defaults by name, numbers that can be made by hand, with and without steps."""

import os
import re
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

BOX = """\
[numbers]
rayleigh = 1e5
[shell]
geometry = "box"
sides = "reflecting"
[grid]
radial = 20
lateral = 20
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
[viscosity.exponential]
thermal_contrast = 1000
unity_at = 0.5
[heat]
uniform = 4
[initial]
modes = [{}]
[march]
end_time = 0.01
"""
# Whatever depends on the machine: a line that begins so, and what goes on below it.
OF_THE_MACHINE = ("time to march", "memory", "processor time", "  by the clock", "  of it", "measured", "pilot",
                  "  its last half", "time step")


def check(case, *options, code=runs.DONE, ranks=1):
    return runs.expect(runs.run("check", case, *options, ranks=ranks), code)


def entries(text):
    """name -> text of each line, continued lines joined."""
    found, name = {}, None
    for line in text.splitlines():
        match = re.match(r"  (\S.{21}|  \S.{19}) (\S.*)$", line) or re.match(r"  (\[[\w.]+\])()$", line)
        if match:
            name = match[1].rstrip()
            found[name] = match[2]
        elif line.startswith(" " * 25) and name:
            found[name] = f"{found[name]} {line.strip()}".strip()
        else:
            name = None
    return found


def refuses(scratch):
    case = scratch.write("box.toml", BOX)
    wrong = check(case, "--set", "grid.radia=3", code=runs.BAD_INPUT)
    assert "grid.radia" in wrong.err and "radial" in wrong.err and wrong.out == "", wrong
    missing = check(scratch.path("none.toml"), code=runs.BAD_INPUT)
    assert "none.toml" in missing.err and missing.out == "", missing
    none = runs.expect(runs.run("check"), runs.BAD_INPUT)
    assert "name a case file" in none.err, none
    few = check(case, ranks=3, *("--set", "grid.lateral=8"), code=runs.BAD_INPUT)
    assert "8 lateral cells on 3 ranks" in few.err, few


def names_each_default(scratch):
    """Every key of the case as read that the file does not give, and no key that it gives."""
    case = scratch.write("box.toml", BOX)
    said = entries(check(case, "--no-steps").out)
    expected = {
        "[shell]": ["width = 1 d"],
        "[grid]": ["inner_refinement = 1", "outer_refinement = 1", "left_refinement = 1", "right_refinement = 1"],
        "[walls.inner]": ['flow = "free-slip"'],
        "[walls.outer]": ['flow = "free-slip"'],
        "[viscosity]": ["constant = 1 eta_ref", "layers = none", "lowest = 0 eta_ref", "highest = no cut-off"],
        "[viscosity.exponential]": ["depth_contrast = 1"],
        "[heat]": ["layers = none"],
        "[initial]": ['base = "conductive"', "noise = 0 DeltaT", "seed = 1", "from = none"],
        "[flow]": ["tolerance = 1e-6", "most_iterations = 200", "memory = 4", "refactor_cost = 20", "most_newton_steps = 60"],
        "[transport]": ['flux = "limited"', "courant = 0.5", "accuracy = 0.0001 DeltaT", "first_step = 1e-6 d^2/kappa",
                        "largest_step = 0.01 d^2/kappa", "growth = 1.3"],
        "[march]": ['until = "time"', "most_steps = 0", "wall_clock = 0 s", "steady = 0 DeltaT kappa/d^2"],
        "[output]": ["history_every = 1", "snapshot_every = 0 d^2/kappa", "checkpoint_every = 200", "checkpoints_kept = 2",
                     "normal_stress = true", "pictures = true", "report = true"],
    }
    for table, keys in expected.items():
        assert said[table] == ", ".join(keys), (table, said[table])
    assert "[numbers]" not in said, said
    fewer = entries(check(case, "--no-steps", "--set", "transport.courant=0.4").out)
    assert "courant" not in fewer["[transport]"], fewer["[transport]"]


def number(text):
    return float(re.match(r"(?:theta = |Ra is |Di = )?([-\d.e]+)", text)[1])


def numbers_by_hand(scratch):
    """eta = 1000^(1/2 - T): Ra/sqrt(1000) and Ra sqrt(1000) at the walls, Ra_Q = Ra H."""
    said = entries(check(scratch.write("box.toml", BOX), "--no-steps").out)
    assert number(said["Rayleigh number"]) == 1e5, said
    assert said["  at the walls"].startswith("3162 outer, 3.16e6 inner") or said["  at the walls"].startswith("3160 outer"), said
    assert number(said["  half way"]) == 1e5, said
    assert number(said["  Ra_Q, sources"]) == 4e5, said
    assert number(said["viscosity contrast"]) == 1000, said
    assert number(said["Frank-Kamenetskii"]) == 6.91, said
    assert number(said["conducted heat"]) == 1, said
    # T = (1 - z) + 2 z (1 - z): 3 leaves, 1 goes down, 4 is made. Second order on 20 cells.
    assert said["  with sources"].startswith("3 out, -1 in from below, 4 from sources"), said
    assert said["adiabatic rise"].startswith("none"), said


def isoviscous(scratch):
    """27 pi^4/4 = 657.51 on 20 cells to a percent; the benchmark's Nu 10.534 is in the spread; cells from the thickness."""
    case = scratch.write("box.toml", BOX)
    plain = ["--set", "viscosity.exponential.thermal_contrast=1", "--set", "heat.uniform=0"]
    said = entries(check(case, "--no-steps", "--set", "shell.width=1.41421356", *plain).out)
    times, critical = re.match(r"Ra is ([\d.]+) times critical \(([\d.]+)\)", said["onset"]).groups()
    assert abs(float(critical) / 657.511 - 1) < 0.01, said["onset"]
    assert abs(float(times) * float(critical) / 1e5 - 1) < 0.01, said["onset"]
    low, high = map(float, re.match(r"([\d.]+) to ([\d.]+) at the outer", said["Nusselt number"]).groups())
    assert low < 10.534 < high, said["Nusselt number"]  # Blankenbach et al. 1989, case 1b
    for place in ("below the surface", "at the inner wall"):
        thickness, cells = map(float, re.match(r"([\d.]+) d, ([\d.]+) cells", said[place]).groups())
        assert abs(cells - 20 * thickness) < 0.06, said[place]
    assert "common practice" in said["advice"], said["advice"]
    assert said["viscosity"] == "uniform", said


def warns(scratch):
    case = scratch.write("box.toml", BOX)
    quiet = check(case, "--no-steps", "--set", "numbers.rayleigh=100", "--set", "heat.uniform=0")
    assert "not convecting" in quiet.out and "dies away" in quiet.out, quiet.out
    still = check(scratch.write("still.toml", BOX.replace("[initial]\nmodes = [{}]\n", "")), "--no-steps")
    assert "nothing disturbs the start" in still.out, still.out
    rest = BOX.replace("[walls.inner]\ntemperature = 1", "[walls.inner]\ninsulating = true")
    cools = check(scratch.write("rest.toml", rest), "--set", "heat.uniform=0")
    assert "dies away" in cools.out and not re.search(r"\b(nan|inf)\b", cools.out), cools.out
    body = os.path.join(runs.SOURCE, "cases", "rocky_body_si.toml")
    said = check(body, "--no-steps")
    # alpha g d/cp = 3e-5 * 4.1 * 1225e3/1200
    assert "dissipation number of 0.13" in said.out, said.out
    # d^2/kappa = (1225e3)^2/(3.5/(3400 * 1200)) s = 1.7493e18 s = 55433 Myr
    assert "d^2/kappa = 55400 Myr" in " ".join(said.out.split()), said.out


def with_steps(scratch):
    case = scratch.write("box.toml", BOX)
    before = sorted(os.listdir(os.path.dirname(case)))
    result = check(case, "--progress")
    assert "coarse pilot" in result.err, result.err
    said = entries(result.out)
    assert re.match(r"[\d.]+ s for \d+ steps", said["time to march"]), said["time to march"]
    assert 30 < float(re.match(r"(\d+) MiB", said["memory"])[1]) < 400, said["memory"]
    assert "100 % of the march" in said["pilot"], said["pilot"]
    assert sorted(os.listdir(os.path.dirname(case))) == before, "something was written"
    steps = float(re.search(r"for (\d+) steps", said["time to march"])[1])
    folder = scratch.path("run")
    runs.expect(runs.run("march", case, "--into", folder), runs.DONE)
    assert abs(steps / runs.last_step(folder) - 1) < 0.1, (steps, runs.last_step(folder))
    return result.out


def without_the_machine(text):
    kept, skip = [], False
    for line in text.splitlines():
        if line.startswith(" " * 25):
            if not skip:
                kept.append(line)
            continue
        skip = any(line.startswith(f"  {name}") for name in OF_THE_MACHINE) or line.startswith("  Nusselt number")
        if not skip:
            kept.append(line)
    return kept


def on_three_ranks(scratch, alone):
    several = check(scratch.write("box.toml", BOX), ranks=3)
    assert without_the_machine(several.out) == without_the_machine(alone), (several.out, alone)
    assert "on 3 ranks" in several.out


def fits_eighty_columns(scratch):
    for name in sorted(os.listdir(os.path.join(runs.SOURCE, "cases"))):
        if name.endswith(".toml"):
            result = check(os.path.join(runs.SOURCE, "cases", name), "--no-steps")
            wide = [line for line in result.out.splitlines() if len(line) > 80]
            assert not wide and not re.search(r"\b(nan|inf)\b", result.out), (name, wide, result.out)


def main():
    with runs.Scratch() as scratch:
        refuses(scratch)
        names_each_default(scratch)
        numbers_by_hand(scratch)
        isoviscous(scratch)
        warns(scratch)
        on_three_ranks(scratch, with_steps(scratch))
        fits_eighty_columns(scratch)


main()
