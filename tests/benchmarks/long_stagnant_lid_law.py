"""The law of heat flow under a stagnant lid over a decade of the Rayleigh number: see stagnant_lid_law.py.

Called by ctest with the path of the program.
"""

import sys

sys.dont_write_bytecode = True  # no litter in the source tree
from stagnant_lid_law import check_law  # noqa: E402

check_law([(1e7, 2.5, 48, 0.35, 0.3), (3e7, 3.5, 48, 0.25, 0.2), (1e8, 5.0, 64, 0.18, 0.15)])
