"""Blankenbach et al. (1989), case 2b: viscosity by temperature and depth.

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
    grids = [(32, 64), (48, 96), (64, 128)]
    finish(check_steady(Benchmark(sys.argv[1], "blankenbach_1989_2b"), 1e4, grids))


main()
