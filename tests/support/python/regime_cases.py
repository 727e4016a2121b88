"""The five cases of cases/ that show a regime each, and what a march must say of them."""

import os
import time
import tomllib

import runs

REGIMES = {
    "not_convecting": "not convecting",
    "stagnant": "stagnant lid",
    "sluggish": "sluggish lid",
    "mobile": "mobile lid",
    "episodic": "episodic lid",
}
LEAST_PROBABILITY = 0.9


def case_file(name):
    return os.path.join(runs.SOURCE, "cases", f"regime_{name}.toml")


def with_half_the_spacing(name):
    grid = tomllib.loads(runs.read(case_file(name)))["grid"]
    return runs.settings(grid__radial=2 * grid["radial"], grid__lateral=2 * grid["lateral"])


def check(scratch, name, settings, timeout):
    """Marches to the case's own end; the folder of the run."""
    begin = time.monotonic()
    folder = scratch.path(name)
    result = runs.expect(runs.run("march", case_file(name), "--into", folder, *settings, timeout=timeout), runs.DONE)
    summary = tomllib.loads(runs.read(os.path.join(folder, "summary.toml")))
    assert summary["regime"] == REGIMES[name], result
    assert summary["regime_probability"] > LEAST_PROBABILITY, result
    assert f"regime                {REGIMES[name]}, probability" in result.out, result
    print(f"{name}: {summary['steps']} steps, {time.monotonic() - begin:.1f} s", flush=True)
    return folder
