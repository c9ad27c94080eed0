#!/usr/bin/env python3
"""Check witnesses from a bare checkout: python3 tools/check_witness.py FILE... Needs nothing but Python."""

import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parent.parent / "lowindex"))

from checker.__main__ import main

sys.exit(main(sys.argv[1:]))
