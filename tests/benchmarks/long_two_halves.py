"""The errors of time means hold on a real chaotic run: its two halves agree within them.

A wide periodic box heated from within and below, strongly time dependent. Each half of its history is judged on its own, as a run folder
that holds those rows alone. (Common practice, no source: means over two parts of a stationary record differ by no more than their errors.)

Called by ctest with the path of the program.
"""

import math
import os
import re
import shutil
import sys

HERE = os.path.dirname(os.path.abspath(__file__))
sys.path.insert(0, os.path.join(HERE, "..", "support", "python"))
import runs  # noqa: E402

CASE = """\
title = "a chaotic mantle"
[numbers]
rayleigh = 1e6
[shell]
geometry = "box"
width = 4
[grid]
radial = 24
lateral = 96
[walls.inner]
temperature = 1
[walls.outer]
temperature = 0
[heat]
uniform = 5
[initial]
base = "boundary-layers"
interior = 0.7
noise = 0.05
modes = [{ lateral = 3, radial = 1, amplitude = 0.05 }, { lateral = 2, radial = 1, amplitude = 0.03 }]
[march]
end_time = 1.2
[output]
pictures = false
report = false
"""
QUANTITIES = ("mobility", "rms velocity", "Nusselt number")


def half(scratch, folder, name, keep):
    """A copy of a run whose history has only the rows that `keep` says of their times."""
    copy = scratch.path(name)
    shutil.copytree(folder, copy)
    path = os.path.join(copy, "history.csv")
    with open(path, encoding="utf-8") as file:
        lines = file.readlines()
    head = [n for n, line in enumerate(lines) if not line.startswith("#")][0]
    time = lines[head].strip().split(",").index("time")
    rows = [line for line in lines[head + 1 :] if keep(float(line.split(",")[time]))]
    with open(path, "w", encoding="utf-8") as file:
        file.writelines(lines[: head + 1] + rows)
    return copy


def means(folder):
    """Mean and error of what the verb `regime` names as evidence."""
    said = runs.expect(runs.run("regime", folder), runs.DONE).out
    found = {name: re.search(name + r" ([0-9.e+-]+) \+- ([0-9.e+-]+)", said) for name in QUANTITIES}
    assert all(found.values()), said
    return {name: (float(match[1]), float(match[2])) for name, match in found.items()}


def main():
    with runs.Scratch() as scratch:
        case, folder = scratch.write("chaotic.toml", CASE), scratch.path("whole")
        runs.expect(runs.run("march", case, "--into", folder, timeout=900), runs.DONE)
        first = means(half(scratch, folder, "first", lambda t: 0.2 <= t < 0.7))
        second = means(half(scratch, folder, "second", lambda t: t >= 0.7))
        for name in QUANTITIES:
            apart = abs(first[name][0] - second[name][0]) / math.hypot(first[name][1], second[name][1])
            print(f"{name}: {first[name]}, {second[name]}: {apart:.2f} errors apart")
            assert apart < 1, name


if __name__ == "__main__":
    main()
