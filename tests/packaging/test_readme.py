"""What the README shows is what the program does.

Every console block is run and compared; a line ``…`` stands for any number of lines left out.
"""

import os
import re
import shlex
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

import soplint
from soplint.__main__ import COMMANDS
from soplint.cautions import CAUTIONS
from soplint.findings.model import REASONS, SEVERITIES

CHECKOUT = Path(__file__).resolve().parents[2]
README = (CHECKOUT / "README.md").read_text(encoding="utf-8")
FENCE = re.compile(r"^```(\w+)\n(.*?)^```$", re.MULTILINE | re.DOTALL)
BLOCKS = FENCE.findall(README)
PROSE = FENCE.sub("", README)
CODE = re.findall(r"`([^`\n]+)`", PROSE)
CONSOLE = [body for kind, body in BLOCKS if kind == "console"]
EXAMPLE = "HFL-SOP-231.md"


def of_kind(kind):
    return [body for found, body in BLOCKS if found == kind]


def environment(**more):
    kept = {k: v for k, v in os.environ.items() if not k.startswith(("GIT_", "SOPLINT_"))}
    return {**kept, "PYTHONPATH": str(CHECKOUT), "PYTHONUTF8": "1", **more}


def shell(command, folder):
    """Run ``command`` as typed in ``folder``, with a ``soplint`` on the path."""
    programs = folder / "programs"
    programs.mkdir(exist_ok=True)
    program = programs / "soplint"
    program.write_text(f'#!/bin/sh\nexec {shlex.quote(sys.executable)} -m soplint "$@"\n')
    program.chmod(0o755)
    path = f"{programs}{os.pathsep}{os.environ.get('PATH', os.defpath)}"
    return subprocess.run(
        ["sh", "-c", command],
        cwd=folder,
        env=environment(PATH=path),
        capture_output=True,
        encoding="utf-8",
        timeout=60,
    )


def helped(*arguments):
    done = subprocess.run(
        [sys.executable, "-m", "soplint", *arguments, "--help"],
        env=environment(),
        capture_output=True,
        encoding="utf-8",
        timeout=60,
    )
    assert done.returncode == 0
    return done.stdout


@pytest.fixture(scope="module")
def options():
    """Command -> options in its help."""
    return {name: set(re.findall(r"^  (--[\w-]+)", helped(name), re.M)) for name in COMMANDS}


@pytest.fixture
def room(tmp_path):
    """A folder with the README's example and the samples."""
    (example,) = of_kind("markdown")
    (tmp_path / EXAMPLE).write_text(example, encoding="utf-8")
    shutil.copytree(CHECKOUT / "samples", tmp_path / "samples")
    return tmp_path


# --- the two commands --------------------------------------------------------------------------


def two_commands():
    return [body for body in of_kind("sh") if "venv" in body]


def test_two_commands_of_one_line_each():
    review, test = two_commands()
    for command in (review, test):
        assert command.count("\n") == 1
        assert command.startswith("python3 -m venv .venv && .venv/bin/pip install -q ")
    assert review.endswith(" . && .venv/bin/soplint review samples/\n")
    assert test.endswith(' -e ".[test]" && .venv/bin/python -m pytest\n')


def plain(words):
    """The arguments of a command without those that only keep it quiet or tidy."""
    words = " ".join(shlex.split(words)).replace("--editable", "-e")
    for tidy in ("--quiet", "-q", "--disable-pip-version-check", "-p no:cacheprovider"):
        words = re.sub(rf"(?<!\S){tidy}(?!\S)", "", words)
    return words.split()


def test_test_command_is_what_ci_runs():
    steps = (CHECKOUT / ".ci" / "run").read_text(encoding="utf-8")
    (installed,) = re.findall(r"-m pip install (.*)", steps)
    tests = re.findall(r"-m pytest(.*)", steps)
    _, install, run = two_commands()[1].split(" && ")
    assert plain(install.partition("pip install")[2]) == plain(installed) == ["-e", ".[test]"]
    assert plain(run.partition("-m pytest")[2]) == plain(tests[0]) == []


def test_review_of_the_samples_ends_with_1():
    done = subprocess.run(
        [sys.executable, "-m", "soplint", *two_commands()[0].split("/soplint ")[1].split()],
        cwd=CHECKOUT,
        env=environment(),
        capture_output=True,
        timeout=60,
    )
    assert "ends with 1" in PROSE
    assert (done.returncode, done.stderr) == (1, b"")


# --- the console blocks ------------------------------------------------------------------------


def difference(shown, real):
    """The first group of shown lines that the output lacks, in order; None when all are there."""
    lines = real.splitlines()
    pieces = re.split(r"^…$", shown.removesuffix("\n"), flags=re.MULTILINE)
    at = 0
    for number, piece in enumerate(pieces):
        wanted = piece.strip("\n").splitlines()
        starts = range(at, at + 1 if number == 0 else len(lines) + 1)
        if number == len(pieces) - 1 and wanted:
            starts = [len(lines) - len(wanted)] if len(pieces) > 1 else [0]
        hit = next((s for s in starts if s >= at and lines[s : s + len(wanted)] == wanted), None)
        if hit is None:
            return piece
        at = hit + len(wanted)
    return None if at == len(lines) or not pieces[-1].strip() and len(pieces) > 1 else real


@pytest.mark.parametrize(
    ("shown", "same"),
    [
        ("a\nb\n", True),
        ("a\n", False),
        ("b\n", False),
        ("a\n…\n", True),
        ("…\nb\n", True),
        ("…\na\n", False),
        ("a\n…\nc\n", False),
        ("a\nb\n…\n", True),
    ],
)
def test_comparison(shown, same):
    assert (difference(shown, "a\nb\n") is None) is same


@pytest.mark.parametrize("block", CONSOLE, ids=lambda body: body.partition("\n")[0][2:])
def test_console_block(block, room):
    command, _, shown = block.partition("\n")
    assert command.startswith("$ soplint ")
    done = shell(command[2:], room)
    assert done.stderr == ""
    missing = difference(shown, done.stdout)
    assert missing is None, f"not in the output:\n{missing}\nthe output is\n{done.stdout}"


def test_example_yields_the_finding_explained(room):
    from soplint.review import review_bytes

    review = review_bytes((room / EXAMPLE).read_bytes(), EXAMPLE)
    (finding,) = review.findings
    place = f"{EXAMPLE}:{finding.span.line}:{finding.span.column}"
    table = PROSE.partition("| part | what it tells |")[2].partition("\n\n")[0]
    for part in (place, finding.severity, finding.rule):
        assert f"`{part}`" in table
    assert review.lines[finding.span.line - 1] in of_kind("markdown")[0].splitlines()


# --- commands, options and words that the text names ---------------------------------------------


def named():
    """Every use of ``soplint`` in code: command (or None for bare options) and its options."""
    lines = [*CODE]
    for kind, body in BLOCKS:
        if kind in ("console", "sh"):
            lines += [line for line in body.splitlines() if kind == "sh" or line[:2] == "$ "]
    for line in lines:
        told = re.search(r"(?:^|[ /])soplint ([a-z].*)", line)
        if told:
            command, *rest = told[1].split()
            yield command, [word for word in rest if word.startswith("--") and word != "--"]
        elif line.startswith("--"):
            yield None, line.split()[:1]


def test_every_command_and_option_named_exists(options):
    uses = list(named())
    assert len(uses) > 10
    everything = set().union(*options.values())
    for command, told in uses:
        assert command is None or command in COMMANDS
        known = everything if command is None else options[command]
        assert set(told) <= known | {"--help", "--version"}, (command, told)


def test_every_command_and_option_is_named(options):
    uses = list(named())
    assert {command for command, _ in uses} >= set(COMMANDS)
    told = {option for _, options_of_use in uses for option in options_of_use}
    assert told >= set().union(*options.values())


@pytest.mark.parametrize("command", ["soplint --version", "soplint --help"])
def test_options_without_a_command(command, tmp_path):
    assert shell(command, tmp_path).returncode == 0


def test_tables_of_words_are_complete():
    for reason in REASONS:
        assert f"`{reason}`" in PROSE
    for severity in SEVERITIES:
        assert f"**{severity}**" in PROSE
    assert re.findall(r"^\| (\d) \| ", PROSE, re.MULTILINE) == ["0", "1", "2", "3"]


def test_cautions_are_those_of_the_record():
    running = " ".join(PROSE.split())
    assert CAUTIONS
    for caution in CAUTIONS:
        assert caution in running


def test_links_lead_somewhere():
    targets = re.findall(r"\]\(([^)#:]+)\)", PROSE)
    assert targets
    assert [t for t in targets if not (CHECKOUT / t).exists()] == []


def test_accuracy_is_what_the_tests_print():
    """Number of values, rms and largest difference in the README, from the printed table."""
    printed = subprocess.run(
        [sys.executable, "-m", "pytest", "tests/equilibria", "-s", "-k", "published_table"]
        + ["-p", "no:cacheprovider"],
        cwd=CHECKOUT,
        env=environment(),
        capture_output=True,
        encoding="utf-8",
        timeout=120,
    ).stdout
    figures = re.findall(
        r"^(.+?) +(\d+) +(\d\.\d{4})(?: +[+-]\d\.\d{4} +[+-](\d\.\d{4}))?", printed, re.M
    )
    told = re.findall(r"^\| [^|]+ \| (\d+) \| (\d\.\d{3}) \| (\d\.\d{3})?", PROSE, re.MULTILINE)
    assert len(told) == 6
    for n, rms, largest in told:
        assert any(number == n and near(rms, value) for _, number, value, _ in figures)
        # The largest of several tables together stands in the line of one of them.
        assert not largest or any(near(largest, value) for *_, value in figures if value)


def near(rounded, value):
    return abs(float(rounded) - float(value)) <= 0.00051


# --- the commit hooks --------------------------------------------------------------------------


def test_hook_of_the_framework():
    (snippet,) = of_kind("yaml")
    hooks = (CHECKOUT / ".pre-commit-hooks.yaml").read_text(encoding="utf-8")
    (name,) = re.findall(r"- id: (\S+)", snippet)
    assert f"- id: {name}\n" in hooks
    assert f"rev: v{soplint.__version__}\n" in snippet
    assert re.search(r"repo: https://[\w.-]+\.example/", snippet)


@pytest.mark.skipif(shutil.which("git") is None, reason="git is not installed")
def test_plain_hook_stops_a_wrong_commit_and_lets_a_right_one_through(room):
    def git(words):
        who = "-c user.name=author -c user.email=author@harrow-fen.example"
        return shell(f"git {who} {words}", room).returncode

    (hook,) = [body for body in of_kind("sh") if body.startswith("#!")]
    assert git("init --quiet .") == 0
    script = room / ".git" / "hooks" / "pre-commit"
    script.parent.mkdir(exist_ok=True)
    script.write_text(hook)
    script.chmod(0o755)
    assert git(f"add {EXAMPLE}") == 0
    assert git("commit --quiet -m wrong") != 0
    procedure = room / EXAMPLE
    procedure.write_text(procedure.read_text("utf-8").replace("6.45 g", "7.35 g"), "utf-8")
    assert git(f"add {EXAMPLE}") == 0
    assert git("commit --quiet -m right") == 0
    (room / "list.csv").write_text("no procedure\n")
    assert git("add list.csv") == 0
    assert git("commit --quiet -m other") == 0
