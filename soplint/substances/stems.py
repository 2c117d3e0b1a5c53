"""Catalogue names without hydrate, strength and state; needed only when the index is prepared."""

from __future__ import annotations

import re

from .naming import HYDRATE_PREFIXES

_PREFIX = "|".join(sorted(HYDRATE_PREFIXES, key=len, reverse=True))
_HYDRATE_WORD = re.compile(
    rf"[\s,(]*(?:\b(?:{_PREFIX})[-\s]?hydrate\b|\b\d+[-\s]hydrate\b|(?<=\s)hydrate\b"
    r"|\banhydrous\b|\(anhydrous\))[\s)]*",
    re.IGNORECASE,
)
_STRENGTH = re.compile(r"\s+\d[\d.–-]*\s*%.*$")
_REMARK = re.compile(
    r"\s*\((?:wetted|about[^)]*|equilibrium mixture)\)|,\s*(?:pellets|glacial|soluble|pure)\b.*$"
)


def stem(name: str) -> str:
    """A catalogue name without its hydrate word, strength and state.

    >>> stem("disodium hydrogen phosphate heptahydrate")
    'disodium hydrogen phosphate'
    >>> stem("hydrochloric acid 37 %")
    'hydrochloric acid'
    """
    name = _REMARK.sub("", name)
    name = _STRENGTH.sub("", name)
    return _HYDRATE_WORD.sub(" ", name).strip(" ,")
