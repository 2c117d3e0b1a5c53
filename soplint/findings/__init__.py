"""The types of the record: entries of the ledger, findings, amendments, permits, coverage.

Reports read these types and nothing else; rules and bench make them.
"""

from soplint.findings.model import Coverage, Entry, Finding, Review

__all__ = ["Coverage", "Entry", "Finding", "Review"]
