"""Each of the five cases that show a regime is told to be in it, and the flow does what the case's comment says."""

import os
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import regime_cases
import runs


def second_half(folder, name):
    h = runs.columns(folder)
    return [x for t, x in zip(h["time"], h[name]) if t >= h["time"][-1] / 2]


def at_rest(folder):
    """Heat leaves as in a mantle at rest, through both walls alike."""
    for name in ("nusselt_outer", "nusselt_inner"):
        assert all(abs(x - 1) < 0.01 for x in second_half(folder, name)), name


def lid_without_motion(folder):
    """About a third of the shell (in a sphere the fourth definition, the tangent at the surface, leads deeper)."""
    for name in ("velocity", "isotherm", "advection"):
        assert all(0.25 < x < 0.4 for x in second_half(folder, f"lid_thickness_{name}")), name
    assert max(second_half(folder, "mobility")) < 0.01


def lid_that_creeps(folder):
    assert all(0.3 < x < 0.6 for x in second_half(folder, "mobility"))


def plate(folder):
    """It yields, and deforms in a small part of its surface: less than a sine would."""
    assert min(second_half(folder, "yielding_share")) > 0.1
    assert min(second_half(folder, "plateness")) > 0.5


def rests_and_founders(folder):
    mobility = runs.columns(folder)["mobility"]
    overturns = [k for k in range(1, len(mobility)) if mobility[k - 1] < 0.5 <= mobility[k]]
    assert len(overturns) >= 6, overturns
    for begin, end in zip(overturns, overturns[1:]):
        assert min(mobility[begin:end]) < 0.1 and max(mobility[begin:end]) > 0.8, (begin, end)


SIGNS = {
    "not_convecting": at_rest,
    "stagnant": lid_without_motion,
    "sluggish": lid_that_creeps,
    "mobile": plate,
    "episodic": rests_and_founders,
}

with runs.Scratch() as scratch:
    for case_name in regime_cases.REGIMES:
        SIGNS[case_name](regime_cases.check(scratch, case_name, [], timeout=200))
