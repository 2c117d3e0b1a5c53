"""Rule cards are read, and a card that is not in form is refused with file and line."""

import re

import pytest

from soplint.checks.cards import CardError, Expectation, card_names, cards, load, read
from soplint.places import folder

PATH = "rules/amounts/mass-gives-concentration.md"

CARD = """\
# amounts.mass-gives-concentration

The mass weighed gives
the stated strength.

severity: major, minor
since: 0.1

## Why

Text.

## How it is computed

c = m / (M V)

## Trips

```procedure
Saline 1 mol/L
Weigh 5.8 g of NaCl.
```
expects: major at line 2
expects: minor at line 1

And a Markdown one:

````markdown
## Saline
```procedure
Weigh 5.8 g of NaCl.
```
````
expects: major at line 3

## Passes

```procedure
Weigh 58.44 g of NaCl.
```

## Sources

- IUPAC
  Green Book
- another

## Departures

None to speak of.
"""


def test_every_part_of_a_card():
    card = read(CARD, PATH)
    assert (card.name, card.family) == ("amounts.mass-gives-concentration", "amounts")
    assert card.summary == "The mass weighed gives the stated strength."
    assert (card.severities, card.severity, card.since) == (("major", "minor"), "major", "0.1")
    assert card.why == "Text."
    assert card.computed == "c = m / (M V)"
    first, second = card.trips
    assert first.text == "Saline 1 mol/L\nWeigh 5.8 g of NaCl.\n"
    assert (first.kind, first.line) == ("sop", CARD[: CARD.index("Saline 1")].count("\n") + 1)
    assert first.expects == (Expectation("major", 2), Expectation("minor", 1))
    assert (second.kind, second.line) == ("md", CARD[: CARD.index("## Saline")].count("\n") + 1)
    assert second.text.splitlines()[1] == "```procedure"
    assert second.expects == (Expectation("major", 3),)
    assert [example.text for example in card.passes] == ["Weigh 58.44 g of NaCl.\n"]
    assert card.sources == ("IUPAC Green Book", "another")
    assert card.departures == "None to speak of."
    assert read(CARD[: CARD.index("## Departures")], PATH).departures is None


@pytest.mark.parametrize(
    ("old", "new", "at", "words"),
    [
        ("# amounts.mass-gives", "# amounts.gives", "# amounts.gives", "as the file is called"),
        ("The mass weighed gives\nthe stated strength.\n", "", "", "requirement is missing"),
        ("severity: major, minor\n", "", "## Why", "'severity: ...' is missing"),
        ("major, minor", "grave", "severity: grave", "'grave' is no class"),
        ("major, minor", "minor, major", "severity: minor", "most severe first"),
        ("major, minor", "major, major", "severity: major", "most severe first"),
        ("since: 0.1", "since:", "## Why", "'since: ...' is missing"),
        ("since: 0.1", "since: 0.1\nmore", "more", "only severity and since"),
        ("## Why\n\nText.\n", "", "None to", "'## Why' is missing"),
        ("\nText.\n", "", "## Why", "empty"),
        ("## Why", "## Reason", "## Reason", "sections are, once each"),
        ("## Sources", "## Passes", "## Passes", "sections are, once each"),
        ("## Why\n\nText.\n", "## Sources\n", "## Sources", "sections are, once each"),
        ("```procedure\nSal", "```python\nSal", "```python", "marked procedure or markdown"),
        ("Weigh 58.44 g of NaCl.\n", "", "```procedure", "this example is empty"),
        ("major at line 2", "major", "expects: major", "expects: CLASS at line N"),
        ("major at line 2", "dire at line 2", "expects: dire", "expects: CLASS at line N"),
        ("major at line 2", "major at line 3", "expects: major", "has lines 1 to 2"),
        ("major at line 2", "critical at line 2", "Saline 1 mol/L", "never gives critical"),
        ("expects: major at line 3\n", "", "````", "follow an example that trips"),
        ("```\n\n## S", "```\nexpects: major at line 1\n## S", "```", "do not belong here"),
        ("of NaCl.\n```\n\n## S", "of NaCl.\n## S", "```procedure", "never closed"),
        ("- IUPAC", "IUPAC", "IUPAC", "each begins with"),
        ("- IUPAC\n  Green Book\n- another\n", "", "## Sources", "at least one source"),
    ],
)
def test_what_is_refused(old, new, at, words):
    assert old in CARD
    text = CARD.replace(old, new, 1)
    with pytest.raises(CardError, match=re.escape(words)) as refused:
        read(text, PATH)
    line = refused.value.line
    assert str(refused.value).startswith(f"{PATH}:{line}: ")
    assert [*text.split("\n"), ""][line - 1].startswith(at)


@pytest.mark.parametrize("end", range(0, CARD.index("- IUPAC"), 7))
def test_a_torn_card_is_refused_and_nothing_else(end):
    with pytest.raises(CardError):
        read(CARD[:end], PATH)


def test_family_must_exist():
    with pytest.raises(CardError, match="no such family"):
        read("# colours.red\n", "rules/colours/red.md")


def test_bytes_that_are_no_text(tmp_path):
    path = tmp_path / "x.md"
    path.write_bytes(b"# \xff\n")
    with pytest.raises(CardError, match="UTF-8"):
        load(str(path))


def test_cards_of_a_folder_come_in_order(tmp_path, monkeypatch):
    for name in ("units.b", "amounts.z", "amounts.a"):
        path = tmp_path / name.replace(".", "/")
        path.parent.mkdir(exist_ok=True)
        text = CARD.replace("amounts.mass-gives-concentration", name)
        path.with_suffix(".md").write_text(text)
    (tmp_path / "README.md").write_text("# not a card\n")
    monkeypatch.setattr("soplint.checks.cards.folder", lambda name: str(tmp_path))
    assert list(cards()) == list(card_names()) == ["amounts.a", "amounts.z", "units.b"]


def test_the_example_in_the_readme_is_in_form():
    with open(f"{folder('rules')}/README.md", encoding="utf-8") as file:
        text = file.read()
    example = text.split("````markdown\n")[1].split("````\n")[0]
    assert read(example, PATH).severities == ("major", "minor", "remark")
