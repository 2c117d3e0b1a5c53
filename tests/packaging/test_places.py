"""The shipped folders are found inside the package, else beside it, and nowhere else."""

import pytest

from soplint import places


@pytest.fixture
def package(tmp_path, monkeypatch):
    """An empty package in an empty checkout."""
    package = tmp_path / "soplint"
    package.mkdir()
    monkeypatch.setattr(places, "__file__", str(package / "places.py"))
    return package


def test_inside_comes_before_beside(package):
    (package.parent / "pyproject.toml").touch()
    (package.parent / "rules").mkdir()
    assert places.folder("rules") == str(package.parent / "rules")
    (package / "rules").mkdir()
    assert places.folder("rules") == str(package / "rules")


def test_a_strangers_folder_is_not_ours(package):
    (package.parent / "rules").mkdir()
    with pytest.raises(FileNotFoundError, match="lacks its folder 'rules'"):
        places.folder("rules")


def test_only_shipped_folders(package):
    with pytest.raises(ValueError, match="there are grammar, rules"):
        places.folder("../rules")


def test_this_checkout_or_installation_has_both():
    import os

    for name in places.FOLDERS:
        assert os.listdir(places.folder(name))
