"""The report: one page that an engineer can sign, drawn from a results folder alone."""

from pullback.studies.reporting.document import draw

__all__ = ["draw"]
