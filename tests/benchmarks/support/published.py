"""A published benchmark: its case and values in benchmarks/physics/NAME, run on a list of grids, extrapolated, compared.

Each finer grid starts from the end of the coarser one. A value's error is judged after Richardson extrapolation of the
two finest grids, order 2 (the scheme's; the observed order is checked where three grids are run).
"""

import csv
import math
import os
import subprocess
import tempfile

import numpy as np

SOURCE = os.environ.get("LIDWRIGHT_SOURCE_DIR") or os.path.join(os.path.dirname(__file__), "..", "..", "..")


def plain_rows(path):
    """Rows of a CSV with `#` lines before the line of names, as dictionaries of text."""
    with open(path) as file:
        return list(csv.DictReader(line for line in file if not line.startswith("#")))


def columns(path):
    """The same, as one array of numbers a column."""
    rows = plain_rows(path)
    return {name: np.array([float(row[name]) for row in rows]) for name in rows[0]}


class Expected:
    """One row of expected.csv: `tolerance` is relative."""

    def __init__(self, row):
        self.quantity, self.source = row["quantity"], row["source"]
        self.value, self.tolerance = float(row["value"]), float(row["tolerance"])

    def holds(self, ours):
        return abs(ours / self.value - 1) <= self.tolerance

    def line(self, ours):
        verdict = "" if self.holds(ours) else "   FAILS"
        return (
            f"  {self.quantity:24} ours {ours:14.8g}  published {self.value:14.8g}  differs {ours / self.value - 1:+.1e}"
            f"  allowed {self.tolerance:.0e}  [{self.source}]{verdict}"
        )


class Benchmark:
    def __init__(self, program, name):
        self.program, self.name = program, name
        self.folder = os.path.join(SOURCE, "benchmarks", "physics", name)
        self.expected = [Expected(row) for row in plain_rows(os.path.join(self.folder, "expected.csv"))]

    def march(self, radial, lateral, into, start=None, settings=()):
        """Runs one grid; returns its run folder."""
        changes = [f"grid.radial={radial}", f"grid.lateral={lateral}", *settings]
        if start:
            changes += [f'initial.from="{start}"', "initial.modes=[]"]
        folder = os.path.join(into, f"{self.name}_{radial}x{lateral}_{len(os.listdir(into))}")
        command = [self.program, "march", os.path.join(self.folder, "case.toml"), "--into", folder]
        for change in changes:
            command += ["--set", change]
        done = subprocess.run(command, capture_output=True, text=True)
        if done.returncode != 0:
            raise SystemExit(f"{' '.join(command)}\nended with {done.returncode}\n{done.stdout}{done.stderr}")
        return folder

    def failures(self, ours, only=lambda _: True):
        """Prints every comparison; returns the lines of those that fail."""
        lines = [(row.holds(ours[row.quantity]), row.line(ours[row.quantity])) for row in self.expected if only(row)]
        for _, line in lines:
            print(line)
        return [line for holds, line in lines if not holds]


def newest(folder, kind):
    return os.path.join(folder, kind, sorted(f for f in os.listdir(os.path.join(folder, kind)) if f.endswith(".csv"))[-1])


def at_side(distance, value):
    """A trace even about a reflecting side, from its two nearest columns."""
    near, far = distance[0] ** 2, distance[1] ** 2
    return (far * value[0] - near * value[1]) / (far - near)


class SteadyState:
    """What the end of a run that stopped as steady shows."""

    def __init__(self, folder):
        self.history = {name: values[-1] for name, values in columns(os.path.join(folder, "history.csv")).items()}
        walls = columns(newest(folder, "walls"))
        left = walls["lateral"]
        self.width = self.history["heat_flow_outer"] / self.history["nusselt_outer"]  # the walls differ by 1
        right = (self.width - left)[::-1]
        top, bottom, stress = walls["outer_heat_flux"], walls["inner_heat_flux"], walls["outer_normal_stress"]
        self.values = {
            "nusselt": self.history["nusselt_outer"],
            "velocity_rms": self.history["velocity_rms"],
            "q1": at_side(left, top),
            "q2": at_side(right, top[::-1]),
            "q3": at_side(right, bottom[::-1]),
            "q4": at_side(left, bottom),
            "stress_top_left": at_side(left, stress),
            "stress_top_right": at_side(right, stress[::-1]),
        }

    def identities(self, rayleigh):
        """Differences that vanish with dT/dt, and the bound the remaining dT/dt puts on them (Cauchy-Schwarz)."""
        h = self.history
        nusselt_mean = (h["nusselt_inner"] + h["nusselt_outer"]) / 2
        return {
            "Nu inner - Nu outer": h["nusselt_inner"] - h["nusselt_outer"],
            "Phi/Ra - (Nu - 1)": h["dissipation"] / (rayleigh * self.width) - (nusselt_mean - 1),
        }, 2 * h["temperature_change_rate"] + 1e-10 * nusselt_mean


def extrapolated(coarse, fine, ratio, order=2):
    return fine + (fine - coarse) / (ratio**order - 1)


def observed_order(cells, values):
    """Order p at which the last three grids fall on value + c cells^-p."""
    (a, b, c), (x, y, z) = cells[-3:], values[-3:]
    wanted = (x - y) / (y - z)
    if wanted <= 0:
        return math.nan
    low, high = 0.1, 8.0
    for _ in range(60):
        p = (low + high) / 2
        if (a**-p - b**-p) / (b**-p - c**-p) < wanted:
            low = p
        else:
            high = p
    return p


def check_steady(benchmark, rayleigh, grids, order_of=(), settings=(), only=lambda _: True):
    """Marches to the steady state on each grid; returns what failed, as lines."""
    failed, states, start = [], [], None
    with tempfile.TemporaryDirectory() as into:
        for radial, lateral in grids:
            start = benchmark.march(radial, lateral, into, start, settings)
            state = SteadyState(start)
            states.append(state)
            h = state.history
            shown = "  ".join(f"{name} {value:.7g}" for name, value in state.values.items())
            print(f"{benchmark.name} {radial} x {lateral}: {h['step']:.0f} steps, time {h['time']:.4f},"
                  f" {h['wall_time']:.1f} s\n  {shown}", flush=True)
            with open(os.path.join(start, "summary.toml")) as summary:
                if 'end = "steady"' not in summary.read():
                    failed.append(f"  {radial} x {lateral}: did not become steady, dT/dt {h['temperature_change_rate']:.1e}")
            differences, bound = state.identities(rayleigh)
            for name, difference in differences.items():
                print(f"  {name} = {difference:.1e}, at most {bound:.1e}")
                if abs(difference) > bound:
                    failed.append(f"  {radial} x {lateral}: {name} = {difference:.1e} exceeds {bound:.1e}")
    coarse, fine = states[-2].values, states[-1].values
    ratio = grids[-1][0] / grids[-2][0]
    failed += benchmark.failures({n: extrapolated(coarse[n], fine[n], ratio) for n in fine}, only)
    for name in order_of:
        p = observed_order([g[0] for g in grids], [s.values[name] for s in states])
        print(f"  observed order of {name}: {p:.2f}")
        if not abs(p - 2) <= 0.15:
            failed.append(f"  observed order of {name} is {p:.2f}, not 2 +- 0.15")
    return [f"{benchmark.name}\n{line}" for line in failed]


def finish(failed):
    if failed:
        raise SystemExit("\nFailed:\n" + "\n".join(failed))
    print("\nAll within their tolerances.")
