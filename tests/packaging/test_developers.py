"""The contributor guide names files, folders and commands that exist."""

import re
from pathlib import Path

import pytest

CHECKOUT = Path(__file__).resolve().parents[2]
GUIDE = (CHECKOUT / "DEVELOPERS.md").read_text(encoding="utf-8")
CODE = re.findall(r"`([^`\n]+)`", re.sub(r"^ *```.*?^ *```$", "", GUIDE, flags=re.M | re.S))
TOPS = ("grammar/", "rules/", "samples/", "soplint/", "tests/", ".ci/")
ROOMS = [path.name for path in (CHECKOUT / "soplint").iterdir() if any(path.glob("*.py"))]


def named_paths():
    """Paths in code spans, alone or as an argument of a command."""
    for word in {word for span in CODE for word in span.split()}:
        if word.startswith(TOPS) and "<" not in word:
            yield word


def test_every_path_exists():
    paths = sorted(named_paths())
    assert len(paths) > 40
    assert [path for path in paths if not (CHECKOUT / path).exists()] == []


@pytest.mark.parametrize("module", sorted(set(re.findall(r"python -m (soplint\.\S+?)[` ]", GUIDE))))
def test_every_module_to_run_exists(module):
    assert (CHECKOUT / (module.replace(".", "/") + ".py")).is_file()


def test_short_paths_lie_in_their_room():
    """``bench/scope.py`` stands for ``soplint/bench/scope.py``."""
    short = [span for span in CODE if re.fullmatch(rf"({'|'.join(ROOMS)})/\w+\.py", span)]
    assert short
    assert [path for path in short if not (CHECKOUT / "soplint" / path).is_file()] == []


def test_every_room_is_in_the_table():
    assert len(ROOMS) >= 10
    for room in ROOMS:
        assert f"| `soplint/{room}/` |" in GUIDE


def test_links_lead_somewhere():
    anchors = {
        re.sub(r"[^\w\- ]", "", title.lower()).replace(" ", "-")
        for title in re.findall(r"^#+ (.+)$", GUIDE, re.MULTILINE)
    }
    links = re.findall(r"\]\(([^)]+)\)", GUIDE)
    assert links
    for link in links:
        path, _, anchor = link.partition("#")
        assert not path or (CHECKOUT / path).exists(), link
        assert not anchor or anchor in anchors, link
