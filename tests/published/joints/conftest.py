"""Lets the tests of this folder share `typed.py` and the `printed.py` above."""

import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parent))
sys.path.insert(0, str(Path(__file__).parents[1]))
