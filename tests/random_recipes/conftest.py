"""The modules of this folder import each other as ``random_recipes``."""

import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parent.parent))
