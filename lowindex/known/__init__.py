"""The catalog of groups and families with known facts and their sources."""

from lowindex.known.entries import Entry, Fact, Source, entries, entry, sources

__all__ = ["Entry", "Fact", "Source", "entries", "entry", "sources"]
