"""Errors of the equilibrium room: all derive from `EquilibriumError` and name the culprit."""

from __future__ import annotations


class EquilibriumError(ValueError):
    """A request the equilibrium kernel cannot answer.

    `culprit` is the name or value at fault, as text.
    """

    def __init__(self, message: str, culprit: str = "") -> None:
        super().__init__(message)
        self.culprit = culprit


class UnknownSubstanceError(EquilibriumError):
    """A name or formula that no table of the room resolves."""


class BadAmountError(EquilibriumError):
    """An amount, volume, temperature or basis that is negative, not finite or out of range."""


class UnreachableError(EquilibriumError):
    """A target pH that the pair or adjuster given cannot reach."""


class NotConvergedError(EquilibriumError):
    """The charge balance was not closed; never seen within the documented ranges."""
