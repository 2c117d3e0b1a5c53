"""Every way in which a make-up line or a volume can be lost on its way to a dose, or leak to another.

Each layout (``data/layouts.txt``) is one way to write a recipe, right as written.  Amounts in guillemets
are the doses that a strength tests; with them stands the volume that they belong to.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from pathlib import Path

import pytest

MARKED = re.compile(r"«([^»]+)»")


@dataclass(frozen=True)
class Layout:
    """A recipe with the volume (mL) that each marked amount belongs to."""

    name: str
    text: str
    volumes: tuple[float, ...]
    kind: str = "md"

    @property
    def amounts(self) -> list[str]:
        return MARKED.findall(self.text)

    def written(self, wrong: int | None = None, factor: float = 1.3) -> str:
        """The procedure, the amount with the number ``wrong`` changed."""
        numbers = iter(range(len(self.amounts)))

        def one(match: re.Match[str]) -> str:
            return changed(match[1], factor) if next(numbers) == wrong else match[1]

        return MARKED.sub(one, self.text)


def changed(amount: str, factor: float) -> str:
    """The amount times a factor, in its own digits.

    >>> changed("7.305 g", 1.3)
    '9.496 g'
    """
    number, unit = amount.split()
    places = len(number.partition(".")[2])
    return f"{float(number) * factor:.{places}f} {unit}"


DATA = Path(__file__).parent / "data"


def cases(name: str) -> list[tuple[list[str], str]]:
    """The cases of a file: the parts of the line that opens each, and its text."""
    text = (DATA / name).read_text(encoding="utf-8")
    found = []
    for part in text.split("\n=== ")[1:]:
        opening, _, body = part.partition("\n")
        found.append((opening.split(" | "), body.rstrip("\n") + "\n"))
    return found


LAYOUTS = [
    Layout(name, body, tuple(float(v) for v in volumes.split(", ")), kind)
    for (name, kind, volumes), body in cases("layouts.txt")
]
LEAKS = {name: body for (name, kind), body in cases("leaks.txt") if kind == "volume"}
STRENGTH_LEAKS = {name: body for (name, kind), body in cases("leaks.txt") if kind == "strength"}

# Layouts that do not come out yet: which of the three tests below fail, and why.
OPEN: dict[str, tuple[str, frozenset[str]]] = {}
OPEN_LEAKS = {}


def _marks(name: str, *tests: str):
    reason, open_tests = OPEN.get(name, ("", frozenset()))
    marked = open_tests.intersection(tests)
    return (pytest.mark.xfail(strict=True, reason=reason),) if marked else ()


def layouts(test: str):
    """One case a layout."""
    made = [pytest.param(x, id=x.name, marks=_marks(x.name, test)) for x in LAYOUTS]
    return pytest.mark.parametrize("layout", made)


def doses(test: str):
    """One case a marked amount."""
    made = []
    for x in LAYOUTS:
        for number, amount in enumerate(x.amounts):
            marks = _marks(x.name, test, f"{test} {amount}")
            made.append(pytest.param(x, number, id=f"{x.name}-{amount}", marks=marks))
    return pytest.mark.parametrize(("layout", "number"), made)


@layouts("volume")
def test_each_dose_has_its_own_volume(bench, volume_of, layout):
    assert len(layout.volumes) == len(layout.amounts) > 0
    carried = bench(layout.written(), f"p.{layout.kind}")
    found = [volume_of(carried, amount) for amount in layout.amounts]
    assert [volume and volume[0] for volume in found] == list(layout.volumes), found


@layouts("right")
def test_right_amounts_agree(review, grave, entry, layout):
    reviewed = review(layout.written(), f"p.{layout.kind}")
    assert grave(reviewed) == []
    verdicts = {amount: entry(reviewed, amount).verdict for amount in layout.amounts}
    assert verdicts == dict.fromkeys(layout.amounts, "agrees")


@doses("wrong")
def test_a_wrong_amount_is_found_and_no_other(review, entry, layout, number):
    text = layout.written(wrong=number)
    reviewed = review(text, f"p.{layout.kind}")
    wrong = entry(reviewed, changed(layout.amounts[number], 1.3))
    found = {f.span.line for f in reviewed.findings if f.severity in ("major", "minor")}
    related = {r.span.line for f in reviewed.findings for r in f.related}
    assert wrong.span.line in found | related
    for other, amount in enumerate(layout.amounts):
        if other != number:
            assert entry(reviewed, amount).verdict != "disagrees"
    assert sum(e.verdict == "disagrees" for e in reviewed.entries) >= 1


def leaks():
    """One case a leak."""
    made = []
    for name, text in LEAKS.items():
        reason = OPEN_LEAKS.get(name)
        marks = (pytest.mark.xfail(strict=True, reason=reason),) if reason else ()
        made.append(pytest.param(text, id=name, marks=marks))
    return pytest.mark.parametrize("text", made)


@leaks()
def test_no_volume_leaks(bench, review, entry, volume_of, text):
    (amount,) = MARKED.findall(text)
    plain = MARKED.sub(r"\1", text)
    assert volume_of(bench(plain), amount) is None
    reviewed = review(plain)
    assert entry(reviewed, amount).verdict == "not-verified"
    assert reviewed.findings == ()


@pytest.mark.parametrize("text", STRENGTH_LEAKS.values(), ids=STRENGTH_LEAKS)
def test_no_strength_leaks(review, entry, text):
    amounts = MARKED.findall(text)
    assert amounts
    reviewed = review(MARKED.sub(r"\1", text))
    assert [entry(reviewed, amount).verdict for amount in amounts] == ["not-verified"] * len(
        amounts
    )
    assert reviewed.findings == ()


def test_no_preparation_is_left_behind(bench):
    """Every dose that is read belongs to exactly one preparation."""
    for layout in LAYOUTS:
        carried = bench(layout.written(), f"p.{layout.kind}")
        keys = [t.stated.key for p in carried.preparations for t in p.taken]
        assert len(keys) == len(set(keys)) >= len(layout.amounts), layout.name


def test_the_cases_are_there():
    assert len(LAYOUTS) >= 50 and len(LEAKS) >= 15 and len(STRENGTH_LEAKS) >= 4
    assert len({x.name for x in LAYOUTS}) == len(LAYOUTS)
    assert set(OPEN) <= {x.name for x in LAYOUTS} and set(OPEN_LEAKS) <= set(LEAKS)


def test_the_changed_amount_is_another_one():
    assert changed("7.305 g", 1.3) == "9.496 g"
    assert all(changed(a, 1.3) != a for layout in LAYOUTS for a in layout.amounts)
