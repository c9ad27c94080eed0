"""Makes the helpers of this folder importable as tests.checker.*, whatever folder pytest is started from."""

import sys
from pathlib import Path

ROOT = str(Path(__file__).resolve().parents[2])
if ROOT not in sys.path:
    sys.path.insert(0, ROOT)
