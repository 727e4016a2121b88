"""All published benchmarks, the slow ones too: see verify_quick.py.

Called by ctest with the path of the program.
"""

import sys

sys.dont_write_bytecode = True  # no litter in the source tree
from verify_quick import check  # noqa: E402

check(sys.argv[1], "--all")
