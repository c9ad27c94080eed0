"""Witnesses for readers: text, LaTeX and HTML, and scripts for a proof assistant, made from the witness alone."""

from lowindex.export.mathml import mathml
from lowindex.export.page import page, table_page
from lowindex.export.proposition import latex, text
from lowindex.export.reading import Reading
from lowindex.export.rocq import rocq

__all__ = ["Reading", "latex", "mathml", "page", "rocq", "table_page", "text"]
