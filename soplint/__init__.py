"""Recompute the numbers of laboratory procedures and report what does not agree.

Data flows one way: bytes -> intake -> notation -> bench (with substances, quantities and
equilibria) -> ledger -> checks -> findings -> reports.  Importing the package loads none of
those rooms; each command loads the ones that it needs.
"""

__version__ = "0.1.0"
__all__ = ["__version__"]
