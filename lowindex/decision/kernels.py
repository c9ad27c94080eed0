"""Whether the compiled kernels are on disk already."""

from __future__ import annotations

from pathlib import Path


def kernels_are_cached() -> bool:
    """Whether the search kernel has a compiled form in its cache (looked for as files, nothing is compiled or imported)."""
    import lowindex

    package = Path(lowindex.__file__).parent
    return any((package / "search" / "__pycache__").glob("search_kernel.search_slice*.nbc"))
