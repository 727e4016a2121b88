"""The verb `figure`: histories, profiles, branches and onset curves of real runs, and its messages about them."""

import os
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

BEGINS = {"png": b"\x89PNG", "svg": b"<?xml", "pdf": b"%PDF-"}
BOX = runs.SETTLING_BOX + "[output]\npictures = false\n"


def march(scratch):
    folder = scratch.path("lid")
    if not os.path.exists(folder):
        case = scratch.write("lid.toml", runs.LID)
        runs.expect(runs.run("march", case, "--into", folder, *runs.settings(march__most_steps=60)), runs.DONE)
    return folder


def figure(*arguments):
    return runs.expect(runs.run("figure", *arguments), runs.DONE)


def refuse(*arguments, says):
    result = runs.expect(runs.run("figure", *arguments), runs.BAD_INPUT)
    assert all(part in result.err for part in says), result
    assert result.err.count("lidwright: ") == 1 and not result.out, result


def is_a(path, form):
    with open(path, "rb") as file:
        return file.read(8).startswith(BEGINS[form])


def every_format(scratch):
    folder = march(scratch)
    for form in BEGINS:
        into = scratch.path(form)
        figure(folder, "history", "profiles", "--format", form, "--into", into, "--columns", "nusselt_outer,time_step")
        names = sorted(os.listdir(into))
        assert names[0] == f"history.{form}" and names[1].startswith("profiles_") and len(names) == 2, names
        assert all(is_a(os.path.join(into, name), form) for name in names), names


def several_times(scratch):
    folder = march(scratch)
    into = scratch.path("times")
    figure(folder, "profiles", "--at", "all", "--into", into)
    result = figure(folder, "profiles", "--at", "snapshot:0,0.01", "--into", into, "--overwrite")
    assert "is nearest to 0.01" in result.out, result
    assert os.listdir(into) == ["profiles.png"]
    refuse(folder, "temperature", "--at", "all", says=["--at all", "only profiles"])
    refuse(folder, "profiles", "--at", "0.01,soon", says=["--at soon", "must be a time"])


def a_column_that_is_not_there(scratch):
    folder = march(scratch)
    refuse(folder, "history", "--columns", "mobilty", says=["history.csv", "mobilty", "did you mean 'mobility'?"])
    refuse(folder, "branch", says=["no branch", "settle --along"])
    assert not os.path.exists(os.path.join(folder, "figures"))


def a_branch(scratch):
    folder = scratch.path("branch")
    along = "numbers.rayleigh=1e4:2e4:3"
    case = scratch.write("box.toml", BOX.replace("false", "true"))
    runs.expect(runs.run("settle", case, "--along", along, "--stability", "--into", folder), runs.DONE)
    into = scratch.path("branch_figures")
    out = figure(folder, "branch", "profiles", "--size", "slide", "--into", into).out.split()
    assert [os.path.basename(path) for path in out] == ["branch.png", "profiles_0002.png"], out
    # What settle draws by itself is this very figure.
    assert runs.digest(os.path.join(folder, "branch.png")) == runs.digest(out[0])
    refuse(folder, "history", says=["only a march has a history"])


def an_onset(scratch):
    folder = scratch.path("onset")
    case = scratch.write("onset.toml", BOX.replace("false", "true"))
    runs.expect(
        runs.run("onset", case, "--modes", "1:3", "--no-error-bars", "--into", folder, *runs.settings(grid__radial=16)),
        runs.DONE,
    )
    out = figure(folder, "onset", "--size", "slide", "--into", scratch.path("onset_figures")).out.split()
    assert runs.digest(os.path.join(folder, "onset.png")) == runs.digest(out[0])
    refuse(folder, "profiles", says=["the mean of a neutral disturbance is 0"])


with runs.Scratch() as scratch_folder:
    for check in (every_format, several_times, a_column_that_is_not_there, a_branch, an_onset):
        check(scratch_folder)
        print(f"{check.__name__}: fine", flush=True)
