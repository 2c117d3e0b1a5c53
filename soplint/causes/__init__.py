"""Likely causes: hypotheses that reproduce a stated number, weighed by how often they occur."""

from soplint.causes.search import Cause, likely_cause

__all__ = ["Cause", "likely_cause"]
