"""The quick published benchmarks, as a user runs them: every value agrees, and the error bars are honest.

Called by ctest with the path of the program; long_verify_all.py asks for everything.
"""

import csv
import os
import subprocess
import sys
import tempfile

LEAST_SHARE = 0.95  # of the bars that hold the known value
WIDEST = 0.002  # median width of a bar over the value


def check(program, *arguments):
    with tempfile.TemporaryDirectory() as into:
        path = os.path.join(into, "table.csv")
        done = subprocess.run([program, "verify", "--csv", path, *arguments], stdout=subprocess.PIPE, text=True)
        print(done.stdout)
        assert done.returncode == 0, f"code {done.returncode}"
        with open(path) as file:
            rows = list(csv.DictReader(line for line in file if not line.startswith("#")))
    rows = [r for r in rows if r["mark"] != "doubtful"]
    held = sum(r["contained"] == "yes" for r in rows) / len(rows)
    widths = sorted(2 * float(r["half_width"]) / abs(float(r["published"])) for r in rows)
    print(f"{len(rows)} values: {held:.1%} of the bars hold them, median width {widths[len(widths) // 2]:.2e}")
    assert held >= LEAST_SHARE and widths[len(widths) // 2] <= WIDEST


if __name__ == "__main__":
    check(sys.argv[1])
