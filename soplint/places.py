"""Where the folders lie that are shipped with the program but are no Python: grammar and rules.

An installed package holds them inside itself; in a checkout they lie beside it, so that a chemist
finds them without opening the program.  ``__file__`` is used rather than ``importlib.resources``,
whose import alone costs more than the rest of a short run.
"""

from __future__ import annotations

import os

FOLDERS = ("grammar", "rules")


def folder(name: str) -> str:
    """Path of the shipped folder ``name``, inside the package or beside it in a checkout.

    Errors: ``ValueError`` for a name that is not in ``FOLDERS``; ``FileNotFoundError`` when the
    installation lacks the folder.

    >>> os.path.basename(folder("rules"))
    'rules'
    """
    if name not in FOLDERS:
        raise ValueError(f"no shipped folder is called {name!r}; there are {', '.join(FOLDERS)}")
    package = os.path.dirname(os.path.abspath(__file__))
    inside = os.path.join(package, name)
    if os.path.isdir(inside):
        return inside
    checkout = os.path.dirname(package)
    beside = os.path.join(checkout, name)
    # Without this condition a stranger's folder "rules" in site-packages would be taken for ours.
    if os.path.isdir(beside) and os.path.isfile(os.path.join(checkout, "pyproject.toml")):
        return beside
    raise FileNotFoundError(f"this installation of soplint lacks its folder {name!r}")
