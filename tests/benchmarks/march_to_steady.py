"""Case 1a of Blankenbach et al. (1989) marched in time until it is steady: what `verify`, which finds steady states
directly, does not see. The published values themselves: verify_quick.py.

Called by ctest with the path of the program.
"""

import csv
import os
import subprocess
import sys
import tempfile

PROGRAM = os.path.abspath(sys.argv[1])
SOURCE = os.environ.get("LIDWRIGHT_SOURCE_DIR") or os.path.join(os.path.dirname(__file__), "..", "..")
CASE = os.path.join(SOURCE, "benchmarks", "physics", "blankenbach_1989_1a", "case.toml")
RAYLEIGH, WIDTH = 1e4, 1.0
CELLS = (16, 32)


def march(cells, folder):
    settings = [f"grid.radial={cells}", f"grid.lateral={cells}", "output.pictures=false", "output.report=false"]
    command = [PROGRAM, "march", CASE, "--into", folder, *(part for s in settings for part in ("--set", s))]
    done = subprocess.run(command, capture_output=True, text=True)
    assert done.returncode == 0, done.stdout + done.stderr
    with open(os.path.join(folder, "summary.toml")) as summary:
        assert 'end = "steady"' in summary.read(), f"{cells} cells did not become steady"
    with open(os.path.join(folder, "history.csv")) as history:
        last = list(csv.DictReader(line for line in history if not line.startswith("#")))[-1]
    return {name: float(value) for name, value in last.items()}


def check_identities(cells, h):
    """Differences that vanish with dT/dt, and the bound the remaining dT/dt puts on them (Cauchy-Schwarz)."""
    nusselt = (h["nusselt_inner"] + h["nusselt_outer"]) / 2
    differences = {
        "Nu inner - Nu outer": h["nusselt_inner"] - h["nusselt_outer"],
        "Phi/Ra - (Nu - 1)": h["dissipation"] / (RAYLEIGH * WIDTH) - (nusselt - 1),
    }
    bound = 2 * h["temperature_change_rate"] + 1e-10 * nusselt
    for name, difference in differences.items():
        print(f"{cells} cells: {name} = {difference:.1e}, at most {bound:.1e}")
        assert abs(difference) <= bound, name


def main():
    ends = []
    with tempfile.TemporaryDirectory() as into:
        for cells in CELLS:
            ends.append(march(cells, os.path.join(into, str(cells))))
            check_identities(cells, ends[-1])
    # Published: 4.884409(10) and 42.864947(20), tables 9-11, from memory.
    for name, published in (("nusselt_outer", 4.884409), ("velocity_rms", 42.864947)):
        coarse, fine = (end[name] for end in ends)
        extrapolated = fine + (fine - coarse) / 3
        print(f"{name}: {coarse:.7g}, {fine:.7g}, as h^2 to {extrapolated:.7g}; published {published}")
        assert abs(extrapolated / published - 1) < 1e-3, name


main()
