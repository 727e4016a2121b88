"""kills.py with many more kills."""

import os
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import kills

kills.main(kills.LONG_KILLS)
