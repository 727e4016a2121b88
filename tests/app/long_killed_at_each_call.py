"""killed_at_each_call.py at every single call."""

import os
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import killed_at_each_call

killed_at_each_call.main(lambda calls: 1)
