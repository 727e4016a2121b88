"""Blankenbach et al. (1989), cases 1a, 1b and 2a marched to steady on coarse grids; the rest: long_blankenbach_1989*.py.

Called by ctest with the path of the program.
"""

import sys

sys.dont_write_bytecode = True  # no litter in the source tree
try:
    from support.published import Benchmark, check_steady, finish
except ImportError as error:
    print(f"skipped: {error} (package python3-numpy)")
    sys.exit(77)


def main():
    program = sys.argv[1]
    failed = check_steady(
        Benchmark(program, "blankenbach_1989_1a"), 1e4, [(16, 16), (32, 32), (64, 64)], ("nusselt", "velocity_rms")
    )
    failed += check_steady(Benchmark(program, "blankenbach_1989_1b"), 1e5, [(32, 32), (48, 48)])
    # These two grids extrapolate 2a's rms velocity to just 0.1%: it is left to the finer ones.
    failed += check_steady(
        Benchmark(program, "blankenbach_1989_2a"), 1e4, [(32, 32), (48, 48)], only=lambda row: row.quantity == "nusselt"
    )
    finish(failed)


main()
