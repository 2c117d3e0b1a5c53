"""``soplint rules``: the list by family, one family, one card as it stands."""

import pytest

from soplint.commands.rules import run as rules

CARD = """\
# {name}

Requirement of {name}.

severity: major, minor
since: 0.1

## Why

x

## How it is computed

x

## Trips

```procedure
1 g
```
expects: major at line 1

## Passes

```procedure
2 g
```

## Sources

- x
"""
NAMES = ("amounts.a", "amounts.b", "hazards.c")


@pytest.fixture
def folder(tmp_path, monkeypatch):
    monkeypatch.setattr("soplint.checks.cards.folder", lambda name: str(tmp_path))
    for name in NAMES:
        path = (tmp_path / name.replace(".", "/")).with_suffix(".md")
        path.parent.mkdir(exist_ok=True)
        path.write_text(CARD.format(name=name))
    return tmp_path


def test_list_by_family(folder, capsys):
    assert rules([]) == 0
    assert capsys.readouterr().out == (
        "amounts\n"
        "  amounts.a (major)\n"
        "      Requirement of amounts.a.\n"
        "  amounts.b (major)\n"
        "      Requirement of amounts.b.\n"
        "hazards\n"
        "  hazards.c (major)\n"
        "      Requirement of hazards.c.\n"
    )


def test_one_family(folder, capsys):
    assert rules(["hazards"]) == 0
    assert capsys.readouterr().out.splitlines()[1:2] == ["  hazards.c (major)"]
    assert rules(["buffers"]) == 0
    assert capsys.readouterr().out == "There are no rules here.\n"


def test_one_card(folder, capsys):
    assert rules(["amounts.b"]) == 0
    assert capsys.readouterr().out == CARD.format(name="amounts.b")


def test_card_that_is_not_in_form_is_a_fault(folder, capsys):
    (folder / "amounts" / "a.md").write_text("# amounts.b\n")
    assert rules([]) == 3
    captured = capsys.readouterr()
    assert captured.out == ""
    assert "a.md:1: the first line must be '# amounts.a'" in captured.err
