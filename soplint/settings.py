"""What a review is told besides the text: which rules, which hold level, which date."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from datetime import date
    from pathlib import Path


@dataclass(frozen=True, slots=True)
class Settings:
    """Settings of one review; the same for every document of a run."""

    only: tuple[str, ...] = ()  # rules or families to apply; empty means all
    without: tuple[str, ...] = ()  # rules or families to leave out; wins over ``only``
    hold_at: str = "major"  # critical, major or minor
    on: date | None = None  # the review date; None means today
    site: Path | None = None  # the site's soplint.toml

    def applies(self, rule: str) -> bool:
        """Whether ``rule`` ("family.requirement") is applied under these settings.

        >>> Settings(only=("amounts",)).applies("amounts.mass-gives-concentration")
        True
        >>> Settings(without=("hazards",)).applies("hazards.acid-into-water")
        False
        """
        names = (rule, rule.partition(".")[0])
        if any(name in self.without for name in names):
            return False
        return not self.only or any(name in self.only for name in names)
