"""Carry a document's preparations out on paper and keep the ledger of its quantities.

``carry_out`` divides a read document into preparations, puts each one's solution on the shelf,
tests every relation between its numbers and enters each stated quantity with one verdict.
"""

from soplint.bench.carry_out import Bench, carry_out
from soplint.bench.ledger import Ledger
from soplint.bench.preparation import Preparation, Stated
from soplint.bench.relation import Relation

__all__ = ["Bench", "Ledger", "Preparation", "Relation", "Stated", "carry_out"]
