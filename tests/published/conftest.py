"""Lets the tests of this folder share `printed.py`, whatever way pytest imports them."""

import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parent))
