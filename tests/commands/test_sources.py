"""Which files a command line means, and what becomes of odd ones."""

import os
import shutil
import subprocess
from pathlib import Path

import pytest

from soplint.commands.sources import LARGEST, Source, Unopened, content, gather, shown

needs_git = pytest.mark.skipif(shutil.which("git") is None, reason="git is not installed")
posix = pytest.mark.skipif(os.name == "nt", reason="file names and kinds of another system")


@pytest.fixture
def here(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    for name in ("GIT_DIR", "GIT_INDEX_FILE", "GIT_WORK_TREE"):
        monkeypatch.delenv(name, raising=False)
    return tmp_path


def make(*names):
    for name in names:
        Path(name).parent.mkdir(parents=True, exist_ok=True)
        Path(name).write_text("1 g\n")


def git(*arguments):
    subprocess.run(["git", *arguments], check=True, capture_output=True)


def names(*paths, named=None):
    sources, _ = gather(list(paths), named)
    return [source.name for source in sources]


def test_folder_gives_procedures_in_order(here):
    make("p/b.md", "p/a.sop", "p/c/d.MD", "p/notes.txt", "p/.hidden/e.md", "p/data.csv")
    assert names("p") == ["p/a.sop", "p/b.md", "p/c/d.MD"]


def test_named_files_of_any_ending_and_each_once(here):
    make("p/a.md", "p/b.txt")
    assert names("p/b.txt", "p/a.md", "p", "./p/../p/a.md") == ["p/b.txt", "p/a.md"]


def test_standard_input(here):
    sources, missed = gather(["-", "-"], "x/y.sop")
    assert (sources, missed) == ([Source("x/y.sop", None)], [])
    assert names("-") == ["-"]


def test_folder_without_procedures(here):
    make("p/notes.txt")
    sources, missed = gather(["p"], None)
    assert sources == []
    assert missed[0].path == "p" and "no procedure" in missed[0].reason


@needs_git
def test_git_ignore_rules_hold(here):
    git("init", "-q", ".")
    make("p/a.md", "p/ignored.md", "p/build/b.md", "p/tracked.md", "p/deleted.md", "p/.h/c.md")
    Path("p/.gitignore").write_text("ignored.md\nbuild/\ntracked.md\n")
    git("add", "-f", "p/tracked.md", "p/deleted.md")
    os.remove("p/deleted.md")
    assert names("p") == ["p/a.md", "p/tracked.md"]
    assert names("p/ignored.md") == ["p/ignored.md"]
    assert names("p/build") == []


@needs_git
def test_repository_inside_a_repository(here):
    git("init", "-q", ".")
    make("inner/a.md", "inner/skip.md", "b.md")
    git("init", "-q", "inner")
    Path("inner/.gitignore").write_text("skip.md\n")
    assert names(".") == ["b.md", "inner/a.md"]


@needs_git
@posix
def test_configuration_of_a_repository_runs_nothing(here):
    git("init", "-q", ".")
    make("a.md")
    Path("hook").write_text("#!/bin/sh\ntouch ran\n")
    os.chmod("hook", 0o700)
    git("config", "core.fsmonitor", str(here / "hook"))
    assert names(".") == ["a.md"]
    assert not Path("ran").exists()
    git("ls-files", "--others")  # control: git itself does run it
    assert Path("ran").exists()


@needs_git
def test_variables_of_a_running_git_do_not_mislead(here, monkeypatch):
    git("init", "-q", ".")
    make("p/a.md", "p/skip.md")
    Path(".gitignore").write_text("skip.md\n")
    monkeypatch.setenv("GIT_DIR", ".git")
    monkeypatch.setenv("GIT_INDEX_FILE", ".git/other-index")
    assert names("p") == ["p/a.md"]


def test_broken_repository_is_searched_without_git(here, capsys):
    make("p/.git", "p/a.md")
    assert names("p") == ["p/a.md"]
    assert "without git's ignore rules" in capsys.readouterr().err


@posix
@pytest.mark.parametrize("repository", [False, pytest.param(True, marks=needs_git)])
def test_links_and_pipes_in_a_folder_are_left_out(here, capsys, repository):
    make("p/a.md", "outside.md")
    if repository:
        git("init", "-q", ".")
    os.symlink("../p", "p/loop")
    os.symlink("../outside.md", "p/link.md")
    os.mkfifo("p/pipe.md")
    os.mkdir("p/folder.md")
    assert names("p") == ["p/a.md"]
    assert "p/link.md: symbolic link, not followed" in capsys.readouterr().err


@posix
def test_what_cannot_be_opened(here):
    os.mkfifo("pipe.md")
    os.symlink("loop.md", "loop.md")
    with open("large.md", "wb") as file:
        file.truncate(LARGEST + 1)
    cases = {
        "gone.md": "no such file",
        "pipe.md": "not a regular file",
        "loop.md": "cannot be read",
        "large.md": "larger than 20 MB",
        "a\0b.md": "cannot be read",
    }
    for path, words in cases.items():
        with pytest.raises(Unopened, match=words):
            content(Source(path, path))
    make("fine.md")
    assert content(Source("fine.md", "fine.md")) == b"1 g\n"


def test_names_in_reports(here):
    assert shown("./p//a.md") == "p/a.md"
    assert shown(str(here / "p" / "a.md")) == "p/a.md"
    assert shown("../a.md") == "../a.md"
    outside = str(here.parent / "other.md")
    assert shown(outside) == outside.replace(os.sep, "/")


@posix
def test_odd_file_names(here):
    odd = [b"new\nline.md", b"\x1b[31mred.md", "\u202ecod.md".encode(), b"latin\xe9.md", b"-.md"]
    for name in odd:
        with open(name, "wb") as file:
            file.write(b"1 g\n")
    found = names(".")
    assert len(found) == len(odd)
    assert "latin\\xe9.md" in found
    for name in found:
        name.encode("utf-8")
