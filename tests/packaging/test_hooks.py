"""The commit hook: its definition, and the command that it runs."""

import re
from pathlib import Path

import pytest

CHECKOUT = Path(__file__).resolve().parents[2]


@pytest.fixture
def hook():
    """Key and value of each line of the one hook that is defined."""
    text = (CHECKOUT / ".pre-commit-hooks.yaml").read_text()
    assert text.count("- id:") == 1
    return dict(re.findall(r"^(?:- |  )(\w+): (.*)$", text, re.MULTILINE))


def test_hook_is_defined_for_procedures(hook):
    assert hook["id"] == "soplint-review"
    assert hook["entry"] == "soplint review"
    assert hook["language"] == "python"
    assert hook["require_serial"] == "true"
    assert [n for n in ("a/b.sop", "b.md", "c.mdx", "sop") if re.search(hook["files"], n)] == [
        "a/b.sop",
        "b.md",
    ]


def test_hook_runs_a_command_that_exists(hook):
    from soplint.__main__ import COMMANDS

    program, command = hook["entry"].split()
    assert program == "soplint"
    assert command in COMMANDS
