"""Groups with known truth, for tests: each function names its source; marks as in published tables: L seen in print, C computed
independently, M from memory."""
