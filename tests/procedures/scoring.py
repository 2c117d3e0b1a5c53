"""Score a set of procedures with a key of their mistakes: found, missed, false.

Run by hand for the list:  python tests/procedures/scoring.py first-look second-look
"""

from __future__ import annotations

import json
import sys
from collections.abc import Iterator
from dataclasses import dataclass, field
from pathlib import Path

from soplint.findings.model import Finding
from soplint.review import review_bytes

HERE = Path(__file__).resolve().parent
ABOVE_REMARK = ("critical", "major", "minor")


@dataclass
class Score:
    """What a review of a set gave."""

    found: list[str] = field(default_factory=list)
    missed: list[str] = field(default_factory=list)
    false: list[str] = field(default_factory=list)  # above remark, on a line without a mistake
    false_grave: list[str] = field(default_factory=list)  # of these critical or major
    quantities: int = 0
    agree: int = 0

    def __str__(self) -> str:
        return (
            f"found {len(self.found)} of {len(self.found) + len(self.missed)}, "
            f"false {len(self.false)} (critical or major {len(self.false_grave)}), "
            f"{self.agree} of {self.quantities} quantities agree"
        )


def procedures(folder: Path) -> Iterator[tuple[Path, list[dict[str, object]]]]:
    """Files of a set with the key of their mistakes."""
    key = json.loads((folder / "answers.json").read_text(encoding="utf-8"))
    for entry in key if isinstance(key, list) else key["procedures"]:
        yield folder / entry["file"], entry.get("mistakes", [])


def score(folder: Path) -> Score:
    """Review every procedure of a set and compare with its key."""
    result = Score()
    for path, mistakes in procedures(folder):
        review = review_bytes(path.read_bytes(), path.name)
        result.quantities += len(review.entries)
        result.agree += sum(e.verdict == "agrees" for e in review.entries)
        findings = [f for f in review.findings if f.severity in ABOVE_REMARK]
        _compare(path.name, mistakes, findings, result)
    return result


def _compare(
    name: str, mistakes: list[dict[str, object]], findings: list[Finding], result: Score
) -> None:
    fair: set[int] = set()
    for mistake in mistakes:
        lines = {int(str(mistake["line"]))}
        listed = mistake.get("lines") or []
        assert isinstance(listed, list)
        lines.update(int(line) for line in listed)
        fair |= lines
        hit = [f for f in findings if f.span.line in lines]
        words = f"{name}:{mistake['line']}: {mistake.get('quote')} ({mistake.get('kind')})"
        if hit:
            result.found.append(f"{words} <- {hit[0].severity} {hit[0].rule}: {hit[0].cause}")
        else:
            result.missed.append(words)
    for finding in findings:
        if finding.span.line not in fair:
            words = f"{name}:{finding.span.line}: {finding.severity} {finding.rule}: {finding.message} | {finding.working}"
            result.false.append(words)
            if finding.severity != "minor":
                result.false_grave.append(words)


if __name__ == "__main__":
    for chosen in sys.argv[1:]:
        scored = score(HERE / chosen if (HERE / chosen).exists() else Path(chosen))
        print(f"\n{chosen}: {scored}")
        for title in ("found", "missed", "false"):
            for line in getattr(scored, title):
                print(f"  {title}: {line}")
