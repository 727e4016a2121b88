"""Bad input through the command line: one message with place and remedy, the right code, and nothing written.

A table of commands, each wrong in one way. What a single value of a case may be is tested in
tests/io/case_bad_input_test.cpp; here a few of each kind go the whole way, with everything that has to do with files,
folders and resuming.
"""

import concurrent.futures
import os
import re
import shutil
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

GOOD = """\
title = "good"
[numbers]
rayleigh = 1e4
[shell]
geometry = "annulus"
radius_ratio = 0.5
[grid]
radial = 8
lateral = 32
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
[initial]
modes = [{ lateral = 3 }]
[march]
end_time = 1
most_steps = 2
"""

BODY = """\
[body]
radius = 2000
core_radius = 2100
gravity = 4
density = 3000
expansivity = 3e-5
conductivity = 3
heat_capacity = 1000
surface_temperature = 200
temperature_drop = 1000
reference_viscosity = 1e20
"""

NOISE = re.compile(r"PETSC|PETSc ERROR|MPI_ABORT|mpirun|Traceback|terminate called|what\(\)|backtrace|\*\*\*|0x[0-9a-f]{6}")


class Bad:
    """A command, the words its message must hold (place, key, value, remedy), its code and number of ranks."""

    def __init__(self, arguments, *words, code=runs.BAD_INPUT, ranks=1):
        self.arguments, self.words, self.code, self.ranks = arguments, words, code, ranks


def listing(folder):
    """Every file and folder below, with kind, size and time of change."""
    found = {}
    for where, folders, names in os.walk(folder):
        for name in folders + names:
            path = os.path.join(where, name)
            status = os.lstat(path)
            # The folder of a run is itself touched by the probe whether it can be written; what is in it counts.
            found[path] = (status.st_mode, status.st_size, status.st_mtime_ns) if name in names else status.st_mode
    return found


def check(bad, cwd):
    result = runs.run(*bad.arguments, ranks=bad.ranks, cwd=cwd, timeout=120)
    runs.expect(result, bad.code)
    assert result.out == "", f"something on standard output: {result}"
    assert result.err.startswith("lidwright: ") and result.err.endswith("\n"), result
    assert len(result.err.splitlines()) == 1 and result.err.count("lidwright: ") == 1, f"not one message: {result}"
    assert not NOISE.search(result.err), f"noise of a library: {result}"
    assert "fault of the program" not in result.err, result
    for word in bad.words:
        assert word in result.err, f"'{word}' is missing: {result}"


def check_all(scratch, table):
    before = listing(scratch.name)

    def outcome(bad):
        try:
            check(bad, scratch.name)
        except AssertionError as error:
            return f"lidwright {' '.join(bad.arguments)}\n{error}"
        return None

    # Each is refused before it could disturb another one.
    with concurrent.futures.ThreadPoolExecutor(2) as pool:
        failures = [text for text in pool.map(outcome, table) if text]
    after = listing(scratch.name)
    changed = sorted(path for path in {*before, *after} if before.get(path) != after.get(path))
    if changed:
        failures.append("these were changed or written:\n" + "\n".join(changed))
    assert not failures, f"{len(failures)} of {len(table)} fail:\n\n" + "\n\n".join(failures)
    print(f"{len(table)} wrong commands, each refused well")


class Cases:
    """Case files in the scratch folder, each the good one with one thing replaced."""

    def __init__(self, scratch):
        self.scratch, self.count = scratch, 0

    def __call__(self, old, new):
        assert old in GOOD
        return self.text(GOOD.replace(old, new, 1))

    def text(self, text):
        self.count += 1
        name = f"case_{self.count}.toml"
        with open(self.scratch.path(name), "wb") as file:
            file.write(text if isinstance(text, bytes) else text.encode())
        return ["march", name, "--into", "never"]


def command_lines():
    good = ["march", "good.toml", "--into", "never"]
    return [
        Bad([], "verb", "--help"),
        Bad(["wander"], "wander", "march", "--help"),
        Bad(["--wander"], "--wander", "--help"),
        Bad(["March", "good.toml"], "March"),
        Bad(["keys", "march"], "march", "--help"),
        Bad(["keys", "--html"], "--html"),
        Bad(["march"], "case file", "--resume"),
        Bad([*good, "--wander"], "--wander", "--help"),
        Bad([*good, "second.toml"], "second.toml"),
        Bad(["march", "good.toml", "--into"], "--into", "FOLDER"),
        Bad([*good, "--into", "elsewhere"], "--into"),
        Bad([*good, "--set"], "--set", "TABLE.KEY=VALUE"),
        Bad(["march", "--resume"], "--resume", "FOLDER"),
        Bad(["march", "good.toml", "--resume", "finished"], "--resume"),
        Bad(["march", "--resume", "finished", "--into", "never"], "--into", "--resume"),
        Bad(["march", "--resume", "finished", "--overwrite"], "--overwrite", "--resume"),
        Bad([*good, "--resume-from-previous"], "--resume-from-previous", "--resume"),
        Bad([*good, "--progress=often"], "--progress"),
    ]


def set_options():
    def wrong(setting, *words):
        return Bad(["march", "good.toml", "--into", "never", "--set", setting], "--set", *words)

    return [
        wrong("march.end_time", "march.end_time"),
        wrong("=3", "key"),
        wrong("", "--set"),
        wrong("march.end_time=", "march.end_time"),
        wrong("march.end_tiem=3", "end_tiem", "did you mean 'end_time'"),
        wrong("marhc.end_time=3", "marhc", "did you mean 'march'"),
        wrong("march.end_time=soon", "march.end_time", "soon"),
        wrong("march.end_time=-1", "march.end_time = -1", "greater than 0"),
        wrong("march.end_time=nan", "march.end_time", "nan"),
        wrong("numbers.rayleigh=inf", "numbers.rayleigh", "inf"),
        wrong("grid.radial=8.5", "grid.radial", "whole number"),
        wrong("march=3", "march"),
        wrong("shell.radius_ratio=1", "shell.radius_ratio = 1", "less than 1"),
        wrong("initial.modes[0].lateral=2", "initial.modes"),
    ]


def case_files(case):
    return [
        Bad(case("rayleigh", "raylegih"), "case_", ":3:", "raylegih", "did you mean 'rayleigh'"),
        Bad(case("[grid]", "[grids]"), "[grids]", "did you mean 'grid'"),
        Bad(case("= 0.5", '= "half"'), ":6:", 'shell.radius_ratio = "half"', "must be a number"),
        Bad(case("= 0.5", "= nan"), ":6:", "shell.radius_ratio = nan"),
        Bad(case("1e4", "inf"), ":3:", "numbers.rayleigh = inf"),
        Bad(case("1e4", "-1e4"), ":3:", "numbers.rayleigh", "at least 0"),
        Bad(case("= 0.5", "= 1.5"), ":6:", "shell.radius_ratio = 1.5", "less than 1"),
        Bad(case("= 0.5", "= 0"), ":6:", "shell.radius_ratio", "greater than 0"),
        Bad(case("= 8", "= 3"), ":8:", "grid.radial = 3", "at least 4"),
        Bad(case("= 8", "= 8000000000"), ":8:", "grid.radial", "at most"),
        Bad([*case("= 8", "= 99999"), "--set", "grid.lateral=99999"], "grid.lateral", "too many"),
        Bad(case('"annulus"', '"torus"'), ":5:", "torus", '"annulus"'),
        Bad(case('"annulus"', '"box"'), ":6:", "radius_ratio"),
        Bad(case("radius_ratio = 0.5\n", ""), ":4:", "shell.radius_ratio is missing"),
        Bad(case("[numbers]\nrayleigh = 1e4\n", ""), "[numbers]", "[body]"),
        Bad(case("[numbers]\nrayleigh = 1e4\n", BODY), "body.core_radius", "less than body.radius"),
        Bad(case("temperature = 1\n", ""), "walls.inner", "temperature", "heat_flux"),
        Bad(case("temperature = 1\n", "temperature = 1\nheat_flux = 2\n"), "walls.inner", "remove"),
        Bad(case("lateral = 3 }", "lateral = 2.5 }"), "initial.modes[1].lateral", "whole number"),
        Bad(case("[march]", "[initial]"), "cannot redefine"),
        Bad(case("[march]", "[march"), ":16:", "not valid TOML"),
        Bad(case.text(GOOD[: GOOD.index("0.5") + 1].rstrip("0")), ":6:", "not valid TOML"),
        Bad(case.text(""), "[numbers]"),
        Bad(case.text(b"\xff\xfe\x00\x01"), "not valid TOML"),
        Bad(case.text(GOOD + "[initial.more]\n"), "more"),
        Bad(case.text(GOOD + 'from_run = "x"\n'), "from_run"),
        Bad(["march", "missing.toml", "--into", "never"], "missing.toml", "cannot be opened", "check the path"),
        Bad(["march", "a_folder", "--into", "never"], "a_folder", "is a folder"),
        Bad(["march", "", "--into", "never"], "case file"),
        Bad(["march", "/dev/null", "--into", "never"], "/dev/null", "[numbers]"),
        Bad(["march", "good.toml/good.toml", "--into", "never"], "good.toml/good.toml", "cannot be opened"),
    ]


def initial_states():
    def wrong(origin, *words, **options):
        origin_set = ["--set", f'initial.from="{origin}"', *runs.settings(**options)]
        return Bad(["march", "good.toml", "--into", "never", *origin_set], *words)

    return [
        wrong("missing.h5", "missing.h5", "check the path"),
        wrong("a_folder", "a_folder", "holds no checkpoint"),
        wrong("good.toml", "good.toml", "not a checkpoint"),
        Bad(["march", "box.toml", "--into", "never", "--set", 'initial.from="finished"'], "initial"),
        wrong("finished", "initial", shell__radius_ratio=0.7),
        wrong("truncated/checkpoints/step_000000002.h5", "step_000000002.h5", "truncated"),
    ]


def folders():
    return [
        Bad(["march", "good.toml", "--into", "finished"], "finished", "holds a run", "--overwrite", "--resume"),
        Bad(["march", "good.toml", "--into", "good.toml"], "good.toml", "not a folder"),
        Bad(["march", "good.toml", "--into", "foreign"], "foreign", "history.csv"),
        Bad(["march", "good.toml", "--into", "foreign", "--overwrite"], "foreign", "history.csv"),
        Bad(["march", "good.toml", "--into", "good.toml/run"], "good.toml", code=runs.NOT_WRITTEN),
        Bad(["march", "good.toml", "--into", "/proc/run"], "/proc/run", code=runs.NOT_WRITTEN),
    ]


def resuming():
    def wrong(folder, *words, more=()):
        return Bad(["march", "--resume", folder, *more], folder, *words)

    newest = "step_000000002.h5"
    return [
        wrong("missing", "holds no run", "check the path"),
        wrong("a_folder", "holds no run"),
        wrong("good.toml", "holds no run"),
        wrong("foreign", "holds no run"),
        Bad(["march", "--resume", ""], "--resume"),
        wrong("unstarted", "no checkpoint", "--overwrite"),
        wrong("single", "one checkpoint", "--overwrite", more=["--resume-from-previous"]),
        wrong("truncated", newest, "truncated", "--resume-from-previous"),
        wrong("empty", newest, "--resume-from-previous"),
        wrong("damaged", newest, "damaged", "--resume-from-previous"),
        wrong("not_ours", newest, "not a checkpoint"),
        wrong("of_another_case", newest, "another case"),
        wrong("of_another_mesh", newest, "another mesh", "8 x 16"),
        wrong("without_case", "case_as_read.toml", "cannot be opened"),
        wrong("bad_case", "case_as_read.toml", "rayleigh"),
        wrong("without_history", "history.csv"),
        wrong("other_history", "history.csv", "head"),
        Bad(["march", "--resume", "finished", "--set", "numbers.rayleigh=2e4"], "[march]", "[output]", "initial.from"),
        Bad(["march", "--resume", "finished", "--set", "flow.tolerance=1e-3"], "[march]", "[output]"),
        Bad(["march", "--resume", "finished", "--set", "march.end_time=-1"], "--set", "march.end_time"),
        Bad(["march", "--resume", "finished", "--set", "march.end_tiem=1"], "--set", "end_tiem"),
    ]


def numerics():
    """What cannot be solved at the very start: nothing is written either."""

    def wrong(*words, **values):
        return Bad(["march", "good.toml", "--into", "never", *runs.settings(**values)], *words, code=runs.NOT_SOLVED)

    return [
        wrong("flow.most_iterations", "step 0", flow__most_iterations=1, flow__tolerance=1e-14),
        wrong("viscosity.lowest", "viscosity.highest", viscosity__exponential__thermal_contrast="1e300"),
        wrong("viscosity", viscosity__constant="1e-300", numbers__rayleigh="1e300"),
    ]


def several_ranks():
    return [
        Bad(["march", "good.toml", "--wander"], "--wander", ranks=2),
        Bad(["march", "missing.toml"], "missing.toml", ranks=2),
        Bad(["march", "good.toml", "--into", "never", "--set", "grid.radial=3"], "grid.radial", ranks=2),
        Bad(["march", "good.toml", "--into", "finished"], "holds a run", ranks=2),
        Bad(["march", "--resume", "truncated"], "truncated", ranks=2),
        Bad(["march", "--resume", "of_another_case"], "another case", ranks=2),
        Bad(
            ["march", "good.toml", "--into", "never", *runs.settings(flow__most_iterations=1, flow__tolerance=1e-14)],
            "flow.most_iterations",
            ranks=2,
            code=runs.NOT_SOLVED,
        ),
        Bad(
            ["march", "good.toml", "--into", "never", "--set", "grid.lateral=4"], "4 lateral cells on 5 ranks", "fewer ranks", ranks=5
        ),
    ]


def change_bytes(path, change):
    with open(path, "rb") as file:
        contents = file.read()
    with open(path, "wb") as file:
        file.write(change(contents))


def prepare(scratch):
    """Good and broken runs."""
    scratch.write("good.toml", GOOD)
    box = GOOD.replace('"annulus"', '"box"').replace("radius_ratio = 0.5\n", "")
    scratch.write("box.toml", box)
    os.mkdir(scratch.path("a_folder"))
    os.mkdir(scratch.path("foreign"))
    scratch.write("foreign/history.csv", "year,event\n")

    def march(into, *more):
        arguments = ["march", scratch.path("good.toml"), "--into", scratch.path(into), "--set", "output.checkpoint_every=1"]
        runs.expect(runs.run(*arguments, *more), runs.DONE)

    march("finished")
    march("another", "--set", "numbers.rayleigh=2e4")
    march("coarse", "--set", "grid.lateral=16")
    newest = "checkpoints/step_000000002.h5"

    def broken(name):
        return runs.copy(scratch.path("finished"), scratch.path(name))

    for name in runs.checkpoints(broken("unstarted")):
        os.remove(scratch.path("unstarted", "checkpoints", name))
    os.remove(os.path.join(broken("single"), "checkpoints/step_000000001.h5"))
    change_bytes(os.path.join(broken("truncated"), newest), lambda b: b[: len(b) // 2])
    change_bytes(os.path.join(broken("empty"), newest), lambda b: b"")
    change_bytes(os.path.join(broken("damaged"), newest), lambda b: b[:5000] + bytes([b[5000] ^ 16]) + b[5001:])
    change_bytes(os.path.join(broken("not_ours"), newest), lambda b: b"\x89HDF\r\n\x1a\n" + b[8:])
    shutil.copy(scratch.path("another", newest), os.path.join(broken("of_another_case"), newest))
    shutil.copy(scratch.path("coarse", newest), os.path.join(broken("of_another_mesh"), newest))
    os.remove(os.path.join(broken("without_case"), "case_as_read.toml"))
    change_bytes(os.path.join(broken("bad_case"), "case_as_read.toml"), lambda b: b.replace(b"rayleigh", b"rayliegh"))
    os.remove(os.path.join(broken("without_history"), "history.csv"))
    change_bytes(os.path.join(broken("other_history"), "history.csv"), lambda b: b.replace(b"time_step", b"dt"))


def main():
    with runs.Scratch() as scratch:
        prepare(scratch)
        case = Cases(scratch)
        check_all(
            scratch,
            command_lines() + set_options() + case_files(case) + initial_states() + folders() + resuming() + numerics(),
        )
        check_all(scratch, several_ranks())
        runs.expect(runs.run("march", scratch.path("good.toml"), "--into", scratch.path("fine")), runs.DONE)


main()
