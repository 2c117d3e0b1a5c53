"""Digests on the record: which rules, constants and settings a review rests on.

Line ends are read as LF, so that a checkout on any system gives the same digest as the package.
"""

from __future__ import annotations

import json
import os
from hashlib import sha256
from typing import TYPE_CHECKING

from soplint.places import folder

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator

    from soplint.settings import Settings


def rules_digest() -> str:
    """Digest of all rule cards, in order of their names."""
    return _digest(folder("rules"), _cards())


def constants_digest() -> str:
    """Digest of every file in a ``data`` folder of the package, in order of their names."""
    return _digest(os.path.dirname(folder_of_package()), _data_files())


def settings_digest(settings: Settings) -> str:
    """Digest of the settings that can change a record; the order of the names does not matter."""
    site = None
    if settings.site is not None:
        with open(settings.site, "rb") as file:
            site = sha256(file.read()).hexdigest()
    told = {
        "only": sorted(set(settings.only)),
        "without": sorted(set(settings.without)),
        "hold_at": settings.hold_at,
        "site": site,
    }
    return "sha256:" + sha256(json.dumps(told, sort_keys=True).encode()).hexdigest()


def folder_of_package() -> str:
    """The folder of the Python package."""
    import soplint

    return os.path.dirname(os.path.abspath(soplint.__file__))


def _cards() -> Iterator[str]:
    from soplint.checks.cards import card_paths

    yield from card_paths()


def _data_files() -> Iterator[str]:
    for here, folders, files in os.walk(folder_of_package()):
        folders[:] = [name for name in folders if not name.startswith((".", "__"))]
        relative = os.path.relpath(here, folder_of_package())
        if "data" in relative.split(os.sep):
            yield from (os.path.join(here, name) for name in files if not name.startswith("."))


def _digest(root: str, paths: Iterable[str]) -> str:
    named = sorted((os.path.relpath(path, root).replace(os.sep, "/"), path) for path in paths)
    total = sha256()
    for name, path in named:
        with open(path, "rb") as file:
            content = file.read().replace(b"\r\n", b"\n")
        total.update(f"{name}\0{len(content)}\0".encode())
        total.update(content)
    return "sha256:" + total.hexdigest()
