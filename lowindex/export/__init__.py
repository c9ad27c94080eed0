"""Witnesses for readers: text and LaTeX, made from the witness alone."""

from lowindex.export.proposition import latex, text
from lowindex.export.reading import Reading

__all__ = ["Reading", "latex", "text"]
