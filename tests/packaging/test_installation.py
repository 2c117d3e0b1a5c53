"""Wheel, source archive, editable and bare checkout all find the grammar and the rules.

The slow tests build and install, so they need the package index once for the build tool.
"""

import os
import shutil
import subprocess
import sys
import tarfile
import zipfile
from pathlib import Path

import pytest

CHECKOUT = Path(__file__).resolve().parents[2]
LEFT_OUT = shutil.ignore_patterns(".*", "__pycache__", "dist", "build", "*.egg-info")
ASK = """
import os, soplint
from soplint import places
print(os.path.dirname(os.path.abspath(soplint.__file__)))
for name in places.FOLDERS:
    print(places.folder(name), len(os.listdir(places.folder(name))))
"""


def python(*arguments, path=None, cwd=None, interpreter=sys.executable):
    env = {k: v for k, v in os.environ.items() if k != "PYTHONPATH"}
    if path is not None:
        env["PYTHONPATH"] = str(path)
    done = subprocess.run(
        [interpreter, *arguments], cwd=cwd, env=env, capture_output=True, text=True, timeout=300
    )
    assert done.returncode == 0, done.stderr
    return done.stdout


def pip(*arguments, interpreter=sys.executable):
    options = ("--quiet", "--disable-pip-version-check")
    return python("-m", "pip", *options, *arguments, interpreter=interpreter)


def answer(output):
    """Folder of the package, then the folders found in it with the number of their files."""
    package, *found = output.split("\n")[:-1]
    assert all(int(line.rpartition(" ")[2]) > 0 for line in found)
    return Path(package), [Path(line.rpartition(" ")[0]) for line in found]


@pytest.fixture(scope="module")
def checkout(tmp_path_factory):
    """A copy of the checkout, so that no build can leave a file in this one."""
    copy = tmp_path_factory.mktemp("clone") / "soplint-clone"
    shutil.copytree(CHECKOUT, copy, ignore=LEFT_OUT)
    return copy


def files(folder):
    return {str(p.relative_to(folder)) for p in folder.rglob("*") if "__pycache__" not in p.parts}


def test_bare_checkout(tmp_path):
    package, found = answer(python("-c", ASK, path=CHECKOUT, cwd=tmp_path))
    assert package == CHECKOUT / "soplint"
    assert found == [CHECKOUT / "grammar", CHECKOUT / "rules"]
    assert not (CHECKOUT / "soplint" / "rules").exists()
    assert not (CHECKOUT / "soplint" / "grammar").exists()


@pytest.mark.slow
def test_wheel(checkout, tmp_path):
    before = files(checkout)
    pip("wheel", "--no-deps", "--wheel-dir", str(tmp_path), str(checkout))
    assert files(checkout) == before
    (wheel,) = tmp_path.glob("*.whl")
    names = set(zipfile.ZipFile(wheel).namelist())
    assert "soplint/py.typed" in names
    for shipped in ("grammar", "rules"):
        for path in files(CHECKOUT / shipped):
            if (CHECKOUT / shipped / path).is_file():
                assert f"soplint/{shipped}/{path}" in names
    for data in (CHECKOUT / "soplint").rglob("data/*"):
        if data.is_file():
            assert data.relative_to(CHECKOUT).as_posix() in names
    tops = {name.split("/")[0] for name in names}
    assert {top for top in tops if not top.endswith(".dist-info")} == {"soplint"}
    check_installed(wheel, tmp_path)


def check_installed(archive, tmp_path):
    installed = tmp_path / "installed"
    pip("install", "--no-deps", "--target", str(installed), str(archive))
    package, found = answer(python("-c", ASK, path=installed, cwd=tmp_path))
    assert package == installed / "soplint"
    assert found == [package / "grammar", package / "rules"]
    told = python("-m", "soplint", "--version", path=installed, cwd=tmp_path)
    assert told.startswith("soplint ")


@pytest.mark.slow
def test_source_archive(checkout, tmp_path):
    venv = tmp_path / "venv"
    python("-m", "venv", str(venv))
    builder = str(venv / ("Scripts" if os.name == "nt" else "bin") / "python")
    pip("install", "hatchling", interpreter=builder)
    python(
        "-m",
        "hatchling",
        "build",
        "-t",
        "sdist",
        "-d",
        str(tmp_path),
        interpreter=builder,
        cwd=checkout,
    )
    (archive,) = tmp_path.glob("*.tar.gz")
    with tarfile.open(archive) as content:
        names = {name.partition("/")[2] for name in content.getnames()}
    assert {"pyproject.toml", "soplint/__main__.py", "rules/README.md"} <= names
    check_installed(archive, tmp_path)


@pytest.mark.slow
def test_editable(checkout, tmp_path):
    venv = tmp_path / "venv"
    python("-m", "venv", str(venv))
    interpreter = str(venv / ("Scripts" if os.name == "nt" else "bin") / "python")
    before = files(checkout)
    pip("install", "--no-deps", "--editable", str(checkout), interpreter=interpreter)
    package, found = answer(python("-c", ASK, cwd=tmp_path, interpreter=interpreter))
    assert package == checkout / "soplint"
    assert found == [checkout / "grammar", checkout / "rules"]
    assert files(checkout) == before
    script = Path(interpreter).with_name("soplint")
    done = subprocess.run([script, "--version"], capture_output=True, text=True, cwd=tmp_path)
    assert (done.returncode, done.stderr) == (0, "")
