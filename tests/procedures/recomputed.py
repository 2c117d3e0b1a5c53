"""How many of the statements that a checker should be able to confirm were confirmed.

Run by hand:  python tests/procedures/recomputed.py
"""

from __future__ import annotations

import json
from pathlib import Path

from soplint.review import review_bytes

HERE = Path(__file__).resolve().parent


def recomputed(folder: Path) -> tuple[list[str], list[str]]:
    """Statements of the key that hold a quantity that agrees, and those that do not."""
    confirmed, open_ = [], []
    key = json.loads((folder / "answers.json").read_text(encoding="utf-8"))
    for entry in key if isinstance(key, list) else key["procedures"]:
        statements = entry.get("recomputable", [])
        if not statements:
            continue
        path = folder / entry["file"]
        review = review_bytes(path.read_bytes(), path.name)
        for statement in statements:
            line, quote = statement["line"], statement["quote"]
            start = review.lines[line - 1].find(quote) + 1
            end = start + len(quote)
            hit = any(
                e.verdict == "agrees"
                and e.span.line == line
                and e.span.column < end
                and start < e.span.end_column
                for e in review.entries
            )
            (confirmed if hit else open_).append(f"{path.name}:{line}: {quote}")
    return confirmed, open_


if __name__ == "__main__":
    yes, no = recomputed(HERE / "right")
    print(f"{len(yes)} of {len(yes) + len(no)} statements confirmed")
    for line in no:
        print("  open:", line)
