"""The five cases that show a regime each are told the same on a grid of half the spacing."""

import os
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import regime_cases
import runs

with runs.Scratch() as scratch:
    for case_name in regime_cases.REGIMES:
        regime_cases.check(scratch, case_name, regime_cases.with_half_the_spacing(case_name), timeout=1500)
