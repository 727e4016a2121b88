"""restart.py on two ranks: stopped by signals to one of them, resumed, the same run bit for bit."""

import os
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import restart
import runs

with runs.Scratch() as scratch:
    two_ranks = restart.Restart(scratch, ranks=2)
    restart.signals(two_ranks)
    restart.finished_run(two_ranks)
