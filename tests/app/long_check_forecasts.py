"""The forecasts of `check` against runs: memory, time and steps, and whether the laws' spread holds the Nusselt number.

Every case is checked, marched, and checked again, since other work on the machine comes and goes; the two forecasts of
time are averaged (geometrically). Time is the processor's: what others take is not the forecast's to know. With names of
cases as further arguments, only those. Prints the table of docs/check.md.
"""

import csv
import math
import os
import re
import subprocess
import sys
import time

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs

# Case, what is set so that the run takes a minute at most and has an end of its own.
CASES = {
    "published_box": {"march__steady": 0, "march__end_time": 0.5},
    "isoviscous_annulus": {},
    "layered_viscosity": {"grid__radial": 48, "grid__lateral": 120},
    "heated_interior_axisymmetric": {},
    "compressed_mantle": {},
    "compressed_body_si": {},
    "regime_not_convecting": {},
    "regime_sluggish": {"march__until": "time", "march__end_time": 0.6, "grid__radial": 32, "grid__lateral": 80},
    "regime_stagnant": {"march__until": "time", "march__end_time": 0.4, "grid__radial": 32, "grid__lateral": 64},
    "rocky_body_si": {"march__end_time": 1000},
}
WITHIN_TIME, WITHIN_MEMORY, LEAST_HELD = 1.5, 0.2, 8
# Said by `check` when the laws' spread need not hold the run's number.
EXPLAINED = "numbers at the end depend on the start"


def flat(text):
    return " ".join(text.split())


def seconds(text):
    parts = re.findall(r"([\d.]+) (h|min|s)\b", text)
    return sum(float(number) * {"h": 3600, "min": 60, "s": 1}[unit] for number, unit in parts)


def forecast(name, settings):
    begin = time.monotonic()
    text = flat(runs.expect(runs.run("check", case_file(name), *settings), runs.DONE).out)
    took = time.monotonic() - begin
    spread = re.search(r"Nusselt number ([\d.]+)(?: to ([\d.]+))? at the outer", text)
    march = re.search(r"time to march (.*?) for ([\d.e]+) steps", text)
    return {
        "seconds": seconds(march[1]),
        "steps": float(march[2]),
        "memory": float(re.search(r"memory (\d+) MiB", text)[1]),
        "low": float(spread[1]),
        "high": float(spread[2] or spread[1]),
        "explained": EXPLAINED in text,
        "took": took,
    }


def case_file(name):
    return os.path.join(runs.SOURCE, "cases", f"{name}.toml")


def march(name, settings, folder):
    """Processor seconds, wall seconds and peak memory in MiB of the run."""
    begin = time.monotonic()
    command = [runs.PROGRAM, "march", case_file(name), "--into", folder, "--no-progress", *settings]
    process = subprocess.Popen(command, env=runs.ENVIRONMENT, stdout=subprocess.DEVNULL)
    peak = 0
    while True:
        ended, status, use = os.wait4(process.pid, os.WNOHANG)
        if ended:
            break
        peak = max(peak, high_water(process.pid))
        time.sleep(0.02)
    assert status == 0, (name, status)
    return use.ru_utime + use.ru_stime, time.monotonic() - begin, peak


def high_water(pid):
    """VmHWM, MiB. Not ru_maxrss, which a child takes over from this script."""
    try:
        found = re.search(r"VmHWM:\s+(\d+) kB", runs.read(f"/proc/{pid}/status"))
        return int(found[1]) / 1024 if found else 0
    except OSError:
        return 0


def nusselt(folder):
    """Mean of the outer wall's over the last half of the run, by time; number of steps."""
    with open(os.path.join(folder, "history.csv"), encoding="utf-8") as file:
        rows = [(float(r["time"]), float(r["time_step"]), float(r["nusselt_outer"]))
                for r in csv.DictReader(line for line in file if not line.startswith("#"))]
    late = [(step, value) for at, step, value in rows if at > rows[-1][0] / 2]
    return sum(s * v for s, v in late) / sum(s for s, _ in late), len(rows) - 1


def main():
    names = sys.argv[2:] or list(CASES)
    held = explained = 0
    wrong = []
    print("| case | steps | time, s | ratio | memory, MiB | ratio | Nu of the run | laws | held |")
    print("|---|---|---|---|---|---|---|---|---|")
    with runs.Scratch() as scratch:
        for name in names:
            settings = runs.settings(**CASES[name])
            folder = scratch.path(name)
            before = forecast(name, settings)
            spent, wall, peak = march(name, settings, folder)
            after = forecast(name, settings)
            foreseen = math.sqrt(before["seconds"] * after["seconds"])
            mean, steps = nusselt(folder)
            inside = before["low"] * (1 - 0.005) <= mean <= before["high"] * (1 + 0.005)  # numbers have three digits
            held += inside
            explained += not inside and before["explained"]
            ratios = foreseen / spent, before["memory"] / peak
            print(f"| {name} | {after['steps']:.0f} ({steps}) | {foreseen:.1f} ({spent:.1f}; {wall:.0f} by the clock) | "
                  f"{ratios[0]:.2f} | {before['memory']:.0f} ({peak:.0f}) | {ratios[1]:.2f} | {mean:.2f} | "
                  f"{before['low']} to {before['high']} | "
                  f"{'yes' if inside else 'no, and says why' if before['explained'] else 'no'} |", flush=True)
            if not 1 / WITHIN_TIME < ratios[0] < WITHIN_TIME:
                wrong.append(f"{name}: time {ratios}")
            if abs(ratios[1] - 1) > WITHIN_MEMORY:
                wrong.append(f"{name}: memory {ratios}")
    print(f"held in {held} of {len(names)}, said why not in {explained}")
    assert not wrong, wrong
    assert held + explained >= LEAST_HELD * len(names) / len(CASES), (held, explained)


main()
