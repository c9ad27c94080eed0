"""Witnesses for readers: text and LaTeX, and scripts for a proof assistant, made from the witness alone."""

from lowindex.export.proposition import latex, text
from lowindex.export.reading import Reading
from lowindex.export.rocq import rocq

__all__ = ["Reading", "latex", "rocq", "text"]
