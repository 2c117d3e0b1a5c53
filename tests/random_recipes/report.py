"""Rates of right recipes with a finding and of slips found:  python tests/random_recipes/report.py 2000

Options behind the number: how many failing texts of each sort are printed (5), the first seed (0).
"""

from __future__ import annotations

import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parent.parent))

from random_recipes.layouts import LAYOUTS  # noqa: E402
from random_recipes.scoring import Failure, Tally, score_right, score_slips  # noqa: E402
from random_recipes.writer import KINDS  # noqa: E402


def grid(tally: Tally, title: str) -> None:
    """Hits out of trials, kind by layout."""
    print(f"\n{title}: {tally.rate():.1f} %")
    print(" " * 13 + "".join(f"{layout:>11}" for layout in LAYOUTS))
    for kind in KINDS:
        cells = [f"{tally.hits[kind, x]}/{tally.trials[kind, x]}" for x in LAYOUTS]
        print(f"{kind:13}" + "".join(f"{cell:>11}" for cell in cells))


def listed(tally: Tally, title: str) -> None:
    """Hits out of trials, by kind of slip."""
    print(f"\n{title}: {tally.rate():.1f} % of {sum(tally.trials.values())}")
    for kind in sorted(tally.trials, key=str):
        print(f"  {kind!s:28} {tally.hits[kind]:4} / {tally.trials[kind]}")


def texts(failures: list[Failure], title: str, count: int) -> None:
    """The first failing texts."""
    for failure in failures[:count]:
        print(f"\n--- {title}, seed {failure.seed}, {failure.group}\n{failure.words}\n")
        print("\n".join("    " + line for line in failure.text.splitlines()))


def main(count: int, shown: int, first: int) -> None:
    seeds = range(first, first + count)
    right = score_right(seeds)
    wrong = score_slips(seeds)
    grid(right.texts, "right recipes with a finding above remark")
    print(f"quantities of right recipes: {right.agree} of {right.quantities} agree")
    grid(wrong.layouts, "slips found")
    listed(wrong.found, "slips found")
    listed(wrong.uncovered, "found, kinds that no hypothesis covers")
    listed(wrong.named, "causes rightly named")
    listed(wrong.computed, "computed value within 3 %")
    grid(wrong.elsewhere, "slip texts with a finding elsewhere")
    faults = [*right.faults, *wrong.faults]
    print(f"\nfaults: {len(faults)}")
    texts(faults, "fault", shown)
    texts(right.failures, "right recipe with a finding", shown)
    texts(wrong.missed, "slip missed", shown)
    texts(wrong.misnamed, "cause not named", shown)
    texts(wrong.miscomputed, "computed value off", shown)
    texts(wrong.strays, "finding elsewhere", shown)


if __name__ == "__main__":
    options = [int(a) for a in sys.argv[1:4]]
    main(*(options + [500, 5, 0][len(options) :]))
