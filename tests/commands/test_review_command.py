"""``soplint review`` from the outside: exit codes, options, messages, reports."""

import json
import os
import subprocess
import sys
from datetime import date

import pytest

MAJOR = "@major amounts.mass-gives-concentration\n"
MINOR = "@minor buffers.target-near-pka\n"


def test_nothing_held(run, write):
    write("a.md", MINOR)
    done = run("review", "a.md")
    assert (done.returncode, done.stderr) == (0, "")
    assert done.stdout.splitlines()[-1].startswith("Not held: 1 minor. 1 procedure, 1 quantity:")
    assert f"Reviewed on {date.today().isoformat()}." in done.stdout


def test_held(run, write):
    write("a.md", MAJOR)
    done = run("review", "a.md")
    assert done.returncode == 1
    assert done.stdout.startswith("a.md:1:1: major, amounts.mass-gives-concentration: on ")
    assert done.stdout.splitlines()[-1].startswith("Held: 1 major.")


@pytest.mark.parametrize(("level", "code"), [("critical", 0), ("major", 1), ("minor", 1)])
def test_hold_level(run, write, level, code):
    write("a.md", MAJOR)
    assert run("review", "--hold-at", level, "a.md").returncode == code


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        ([], "which command"),
        (["audit"], "no command is called 'audit'"),
        (["review"], "review what"),
        (["review", "--quiet", "a.md"], "review has no option --quiet; it has --as"),
        (["review", "-v", "a.md"], "review has no option -v"),
        (["review", "--as", "pdf", "a.md"], "--as takes text, lines, json; not 'pdf'"),
        (["review", "a.md", "--as"], "--as is given without its FORM"),
        (["review", "--hold-at=", "a.md"], "--hold-at takes"),
        (["review", "--hold-at", "remark", "a.md"], "--hold-at takes critical, major, minor"),
        (["review", "--on", "20261201", "a.md"], "YYYY-MM-DD"),
        (["review", "--on", "2026-02-30", "a.md"], "YYYY-MM-DD"),
        (["review", "--on", "2026-12-01", "--on", "2026-12-01", "a.md"], "--on is given twice"),
        (["review", "--workers", "0", "a.md"], "--workers takes"),
        (["review", "--workers", "²", "a.md"], "--workers takes"),
        (["review", "--only", "amounts.no-such", "a.md"], "--only amounts.no-such: no rule"),
        (["review", "--without", "nothing", "a.md"], "--without nothing: no rule or family"),
        (["review", "--named", "x.md", "a.md"], "'-' is not given"),
        (["review", "--to", "x", "--to", "y", "a.md"], "more --to than --as"),
        (["review", "--as", "text", "--as", "json", "a.md"], "two reports"),
        (
            ["review", "--as", "text", "--as", "json", "--to", "x", "--to", "x", "a.md"],
            "two reports",
        ),
        (["review", "--to", "./a.md", "a.md"], "would write over"),
        (["review", "--to", "no/such/folder/r.txt", "a.md"], "cannot be written"),
        (["worksheet"], "one file"),
        (["worksheet", "a.md", "b.md"], "one file"),
        (["worksheet", "--to", "a.md", "a.md"], "would write over"),
        (["rules", "no-such"], "no rule or family has the name 'no-such'"),
        (["rules", "amounts", "units"], "one rule or family"),
    ],
)
def test_what_cannot_be_asked_for(run, write, arguments, words):
    path = write("a.md", MINOR)
    done = run(*arguments)
    assert done.returncode == 2
    assert words in done.stderr
    assert done.stderr.startswith("soplint: ") and done.stderr.count("\n") == 1
    assert done.stdout == ""
    assert path.read_text() == MINOR


def test_every_other_file_is_reviewed(run, write):
    write("good.md", MINOR)
    write("noise.md", b"\0\0\0")
    write("empty/readme.txt")
    done = run("review", "gone.md", "noise.md", "empty", "good.md")
    assert done.returncode == 2
    assert "soplint: gone.md: there is no such file or folder" in done.stderr
    assert "soplint: noise.md: byte 1 is NUL: not text" in done.stderr
    assert "soplint: empty: no procedure in this folder" in done.stderr
    assert "good.md:1:1: minor" in done.stdout
    assert done.stdout.splitlines()[-1].endswith("; 3 paths not reviewed.")


def test_a_fault_in_soplint_names_the_file_and_wins(run, write):
    write("a.md", "@breaks\n")
    write("b.md", MAJOR)
    done = run("review", "a.md", "gone.md", "b.md")
    assert done.returncode == 3
    assert (
        "soplint: a.md: fault in soplint (ZeroDivisionError: division by \\x1b zero)" in done.stderr
    )
    assert "report it" in done.stderr
    assert "Traceback" not in done.stderr
    assert "b.md:1:1: major" in done.stdout
    assert "Traceback" in run("review", "a.md", SOPLINT_TRACE="1").stderr


def test_json_tells_what_was_not_reviewed(run, write):
    write("a.md", "@breaks\n")
    done = run("review", "--as", "json", "--on", "2026-12-01", "gone.md", "a.md")
    record = json.loads(done.stdout)
    assert done.returncode == 3
    assert record["reviewed_on"] == "2026-12-01"
    assert record["not_reviewed"] == [
        {"path": "gone.md", "reason": "there is no such file or folder"},
        {"path": "a.md", "reason": "fault in soplint (ZeroDivisionError)"},
    ]
    assert record["documents"] == []


def test_reports_pair_with_files_in_order(run, write, tmp_path):
    write("a.md", MAJOR)
    done = run("review", "a.md", "--as=json", "--as=lines", "--to=record.json")
    assert json.loads((tmp_path / "record.json").read_bytes())["summary"]["major"] == 1
    assert done.stdout.count("\n") == 1
    done = run("review", "a.md", "--to", "report.txt")
    assert done.stdout == ""
    assert "Held: 1 major." in (tmp_path / "report.txt").read_text()
    run("review", "a.md", "--as", "text", "--as", "lines", "--to", "-", "--to", "l.txt")
    assert (tmp_path / "l.txt").read_text().count("\n") == 1


def test_standard_input_and_its_name(run, write):
    write("b.md", MINOR)
    done = run("review", "--named", "drafts/x.sop", "-", "b.md", input=MAJOR)
    assert done.returncode == 1
    assert "drafts/x.sop:1:1: major" in done.stdout
    assert "b.md:1:1: minor" in done.stdout
    assert run("review", "-", "--as", "lines", input=MAJOR).stdout.startswith("-:1:1: major")


def test_rules_are_chosen_by_name_or_family(run, write):
    write("a.md", MAJOR + MINOR)
    assert run("review", "--as", "lines", "--only", "buffers", "a.md").stdout.count("\n") == 1
    done = run("review", "--as", "lines", "--without", "amounts", "--without", "hazards", "a.md")
    assert "buffers" in done.stdout and "amounts" not in done.stdout


def test_several_processes_keep_the_order_and_survive_each_fault(run, write):
    names = [f"p{number:02}.md" for number in range(34)]
    for name in names:
        write(name, MAJOR)
    write(names[7], "@breaks\n")
    one = run("review", "--as", "json", "--workers", "1", ".")
    many = run("review", "--as", "json", ".")
    assert many.stdout == one.stdout
    assert (one.returncode, many.returncode) == (3, 3)
    assert [d["path"] for d in json.loads(many.stdout)["documents"]] == names[:7] + names[8:]


def test_a_process_that_ends_is_a_fault_not_a_hang(run, write):
    write("a.md", "@ends\n")
    write("b.md", MAJOR)
    done = run("review", "--workers", "2", "a.md", "b.md")
    assert done.returncode == 3
    assert "a.md: fault in soplint" in done.stderr


@pytest.mark.skipif(os.name == "nt", reason="shell of another kind")
def test_reader_that_leaves_early(run, write, tmp_path):
    write("a.md", MAJOR * 20000)
    from_run = run("review", "a.md").returncode
    command = [sys.executable, str(__file__).replace("test_review_command", "driver")]
    env = {**os.environ, "PYTHONPATH": os.pathsep.join(sys.path)}
    with subprocess.Popen(
        [*command, "review", "--as", "lines", "a.md"],
        cwd=tmp_path,
        env=env,
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
    ) as process:
        process.stdout.readline()
        process.stdout.close()
        assert process.stderr.read() == b""
        assert process.wait(30) == from_run == 1


@pytest.mark.skipif(not os.path.exists("/dev/full"), reason="no full device here")
def test_full_and_closed_standard_output(write, tmp_path):
    write("a.md", MAJOR)
    driver = str(__file__).replace("test_review_command", "driver")
    env = {**os.environ, "PYTHONPATH": os.pathsep.join(sys.path)}
    for redirection in (">/dev/full", ">&-"):
        done = subprocess.run(
            f'"{sys.executable}" "{driver}" review a.md {redirection}',
            shell=True,
            cwd=tmp_path,
            env=env,
            stderr=subprocess.PIPE,
        )
        assert done.returncode == 2
        assert done.stderr.startswith(b"soplint: standard output"), redirection
        assert done.stderr.count(b"\n") == 1


def test_terminal_that_lacks_characters(run, write):
    write("a.md", "@major amounts.µ\n")
    done = run("review", "--as", "lines", "a.md", PYTHONUTF8="0", PYTHONIOENCODING="ascii")
    assert done.stdout.startswith("a.md:1:1: major, amounts.\\xb5: ")
    done = run("review", "--as", "json", "a.md", PYTHONUTF8="0", PYTHONIOENCODING="ascii")
    assert json.loads(done.stdout)["documents"][0]["findings"][0]["rule"] == "amounts.µ"


def test_help_and_version(run):
    import soplint

    assert run("--version").stdout == f"soplint {soplint.__version__}\n"
    general = run("--help").stdout
    for command in ("review", "worksheet", "rules", "substances"):
        assert f"\n  {command} " in general
        done = run(command, "--help")
        assert done.returncode == 0
        assert done.stdout.startswith(f"soplint {command} ")
        assert "Ends with 0" in done.stdout
    assert "Ends with 0" in general


def test_no_advertised_choice_is_missing(run, write):
    from soplint.commands.review import FORMS

    write("a.md", MAJOR)
    for form in FORMS:
        done = run("review", "--as", form, "a.md")
        assert done.returncode == 1 and done.stdout and not done.stderr


@pytest.mark.skipif(os.name == "nt", reason="terminals of another kind")
@pytest.mark.parametrize("no_color", ["", "1"])
def test_on_a_terminal(write, tmp_path, no_color):
    """Bold for the class word unless NO_COLOR is set; long lines are broken at the width."""
    import fcntl
    import pty
    import struct
    import termios

    write("a.md", MAJOR)
    ours, theirs = pty.openpty()
    fcntl.ioctl(theirs, termios.TIOCSWINSZ, struct.pack("HHHH", 24, 60, 0, 0))
    env = {**os.environ, "PYTHONPATH": os.pathsep.join(sys.path), "TERM": "xterm"}
    env |= {"NO_COLOR": no_color, "PYTHONUTF8": "1"}
    driver = str(__file__).replace("test_review_command", "driver")
    command = [sys.executable, driver, "review", "a.md"]
    subprocess.run(command, cwd=tmp_path, env=env, stdout=theirs, check=False, timeout=60)
    os.close(theirs)
    shown = b""
    while True:
        try:
            part = os.read(ours, 65536)
        except OSError:  # the other end is closed and everything was read
            break
        if not part:
            break
        shown += part
    os.close(ours)
    first, *rest = shown.decode().splitlines()
    assert ("\x1b[1mmajor\x1b[0m, amounts" in first) == (not no_color)
    assert rest and max(map(len, rest)) <= 60
