"""The verdict on the lid, the means with errors, and the end of a march when means are known."""

import csv
import os
import sys
import tomllib

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

BOX = runs.SETTLING_BOX + """\
[march]
end_time = 10
until = "known"
[output]
pictures = false
report = false
checkpoint_every = 100
"""


def summary(folder):
    return tomllib.loads(runs.read(os.path.join(folder, "summary.toml")))


def statistics(folder):
    with open(os.path.join(folder, "statistics.csv"), encoding="utf-8") as file:
        rows = csv.DictReader(line for line in file if not line.startswith("#"))
        return {row["quantity"]: row for row in rows}


def march(scratch, name, code=runs.DONE, ranks=1, **values):
    folder = scratch.path(name)
    case = scratch.write("box.toml", BOX)
    return folder, runs.expect(runs.run("march", case, "--into", folder, *runs.settings(**values), ranks=ranks), code)


def ends_when_known(scratch):
    """A cell that becomes steady, after ten journeys from wall to wall and long before the end time."""
    folder, result = march(scratch, "known")
    s, t = summary(folder), statistics(folder)
    assert s["end"] == "means known" and s["known"] == "yes" and 0.1 < s["time"] < 2, s
    for name in ("nusselt_outer", "velocity_rms"):
        mean, error = float(t[name]["mean"]), float(t[name]["error"])
        assert error <= 0.02 * mean and s[f"mean_{name}"] == mean and s[f"error_{name}"] == error, t[name]
    assert float(t["temperature_outer"]["mean"]) == 0 and "wall_time" not in t
    # Heat in is heat out, within both errors.
    flows = t["heat_flow_inner"], t["heat_flow_outer"]
    assert abs(float(flows[0]["mean"]) - float(flows[1]["mean"])) < float(flows[0]["error"]) + float(flows[1]["error"])
    assert s["regime"] == "mobile lid" and s["regime_probability"] == 1, s
    assert "mobile lid, probability 1.00" in result.out and "means known" in result.out, result
    tight, _ = march(scratch, "tight", march__known__relative_error=1e-5)
    assert runs.last_step(tight) > runs.last_step(folder)


def resumed_ends_at_the_same_step(scratch):
    """Stopped on the way, and once more right before its end; then resumed when it is over."""
    folder, _ = march(scratch, "parts", march__most_steps=333)
    assert summary(folder)["end"] == "number of steps reached" and summary(folder)["known"] != "yes"
    whole = scratch.path("known")
    for steps in (runs.last_step(whole) - 1, 0):
        runs.expect(runs.run("march", "--resume", folder, "--set", f"march.most_steps={steps}"), runs.DONE)
    table = os.path.join(folder, "statistics.csv")
    assert runs.timeless(folder) == runs.timeless(whole)
    assert runs.read(table) == runs.read(os.path.join(whole, "statistics.csv"))
    runs.expect(runs.run("march", "--resume", folder), runs.DONE)
    assert runs.timeless(folder) == runs.timeless(whole), "a run that is over went on"


def says_why_not(scratch):
    folder, result = march(scratch, "short", march__end_time=0.01)
    s = summary(folder)
    assert s["end"] == "end time reached" and "transient" in s["known"], s
    assert s["regime"] == "undecided" and "transient" in s["regime_why_undecided"], s
    assert "not known" in result.out and "undecided" in result.out, result
    few, result = march(scratch, "few", march__most_steps=5)
    assert "too short" in summary(few)["known"] and "too short" in result.out, result


def on_two_ranks(scratch):
    folder, _ = march(scratch, "two", ranks=2)
    one = scratch.path("known")
    assert runs.last_step(folder) == runs.last_step(one) and summary(folder)["known"] == "yes"
    a, b = (float(statistics(f)["nusselt_outer"]["mean"]) for f in (folder, one))
    assert abs(a - b) < 1e-9, (a, b)
    out = [runs.expect(runs.run("regime", folder, ranks=ranks), runs.DONE).out for ranks in (1, 2)]
    assert out[0] == out[1]


def refuse(code, *arguments, says):
    result = runs.expect(runs.run("regime", *arguments), code)
    assert all(word in result.err for word in says) and result.err.count("\n") == 1 and not result.out, result


def verb(scratch):
    folder = scratch.path("known")
    before = {name: runs.digest(os.path.join(folder, name)) for name in runs.files(folder)}
    plain = runs.expect(runs.run("regime", folder), runs.DONE).out
    assert "mobile lid, probability 1.00" in plain and "stagnant = 0.1" in plain, plain
    for setting, verdict in (("mobile=1.5", "sluggish lid"), ("still_velocity=100", "not convecting")):
        out = runs.expect(runs.run("regime", folder, "--threshold", setting), runs.DONE).out
        assert verdict in out and setting.replace("=", " = ") in out, out
    near = runs.expect(runs.run("regime", folder, "--threshold", f"mobile={mobility(folder):.4g}"), runs.DONE).out
    assert "undecided" in near and "mobile lid" in near and "sluggish" not in near.split("thresholds")[1], near
    listed = runs.expect(runs.run("regime", "--thresholds"), runs.DONE).out
    assert "2000GC000036" in listed and all(len(line) <= 80 for line in listed.splitlines()), listed
    assert before == {name: runs.digest(os.path.join(folder, name)) for name in runs.files(folder)}


def mobility(folder):
    h = runs.columns(folder)
    return h["velocity_rms_outer"][-1] / h["velocity_rms"][-1]


def bad_input(scratch):
    folder = scratch.path("known")
    refuse(runs.BAD_INPUT, says=["name a run folder"])
    refuse(runs.BAD_INPUT, scratch.path("nowhere"), says=["nowhere", "no folder"])
    refuse(runs.BAD_INPUT, scratch.name, says=["no history.csv"])
    refuse(runs.BAD_INPUT, folder, "--threshold", "mobil=1", says=["mobil=1", "did you mean 'mobile'"])
    refuse(runs.BAD_INPUT, folder, "--threshold", "mobile=fast", says=["a number from 0 to 10"])
    refuse(runs.BAD_INPUT, folder, "--threshold", "mobile", says=["NAME=VALUE"])
    hurt = runs.copy(folder, scratch.path("hurt"))
    path = os.path.join(hurt, "history.csv")
    text = runs.read(path)
    for spoilt, says in (
        (text[: text.index("\n0,") + 1], ["too short", "0 rows"]),
        (text.replace("velocity_rms_outer,", "something,"), ["no column 'velocity_rms_outer'"]),
        (text.replace("\n7,", "\n7"), ["history.csv:", "row of"]),
        ("", ["is not the history"]),
    ):
        with open(path, "w", encoding="utf-8") as file:
            file.write(spoilt)
        refuse(runs.BAD_INPUT, hurt, says=says)
    with open(path, "w", encoding="utf-8") as file:
        file.write(text[:-9])  # torn
    runs.expect(runs.run("regime", hurt), runs.DONE)
    os.remove(path)
    refuse(runs.BAD_INPUT, hurt, says=["no history.csv"])


with runs.Scratch() as scratch_folder:
    for check in (ends_when_known, resumed_ends_at_the_same_step, says_why_not, on_two_ranks, verb, bad_input):
        check(scratch_folder)
        print(f"{check.__name__}: fine", flush=True)
