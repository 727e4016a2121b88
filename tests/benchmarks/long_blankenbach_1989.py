"""Blankenbach et al. (1989), the steady cases on finer grids, with the observed order where the viscosity is uniform.

Called by ctest with the path of the program.
"""

import sys

sys.dont_write_bytecode = True  # no litter in the source tree
try:
    from support.published import Benchmark, check_steady, finish
except ImportError as error:
    print(f"skipped: {error} (package python3-numpy)")
    sys.exit(77)

BOTH = ("nusselt", "velocity_rms")


def main():
    program = sys.argv[1]
    failed = check_steady(Benchmark(program, "blankenbach_1989_1b"), 1e5, [(32, 32), (48, 48), (64, 64)], BOTH)
    failed += check_steady(Benchmark(program, "blankenbach_1989_1c"), 1e6, [(48, 48), (64, 64), (96, 96)], BOTH)
    failed += check_steady(Benchmark(program, "blankenbach_1989_2a"), 1e4, [(32, 32), (48, 48), (64, 64)])
    finish(failed)


main()
