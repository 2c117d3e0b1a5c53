"""Spelling: how a name becomes a key that all its written variants share.

A key is the name in lower case without spaces, hyphens, commas and brackets, in British-systematic
spelling of the elements: "Di-sodium hydrogenphosphate", "disodium hydrogen phosphate" -> one key.
"""

from __future__ import annotations

import re

WORD = re.compile(r"[^\W_]+")

# one character for one, so that places in the folded text are places in the source
FOLD = (
    dict(zip(map(ord, "₀₁₂₃₄₅₆₇₈₉⁰¹²³⁴⁵⁶⁷⁸⁹"), "01234567890123456789", strict=True))
    | dict.fromkeys(map(ord, "–—‐‑‒−\u00ad"), "-")
    | dict.fromkeys(map(ord, "•∙⋅⋆‧×✕＊∗・●◦⸱᛫"), "·")
    | dict.fromkeys(map(ord, "\u00a0\u202f\u2009\u2007\u3000\t"), " ")
    | dict.fromkeys(map(ord, "’‘′ʹ`´"), "'")
    | {ord("İ"): "I"}
)
LOOK_ALIKE = str.maketrans("АВЕКМНОРСТХасеохІі", "ABEKMHOPCTXaceoxIi")

_NUMERALS = (
    "hemi:0.5 mono:1 sesqui:1.5 di:2 hemipenta:2.5 tri:3 tetra:4 penta:5 hexa:6 hepta:7 octa:8 "
    "nona:9 ennea:9 deca:10 undeca:11 dodeca:12 hexadeca:16 octadeca:18"
)
HYDRATE_PREFIXES: dict[str, float] = {
    prefix: float(number) for prefix, number in (item.split(":") for item in _NUMERALS.split())
}
HYDRATE_WORDS: dict[float, str] = {
    number: prefix + "hydrate" for prefix, number in HYDRATE_PREFIXES.items() if prefix != "ennea"
}


def spell(word: str) -> str:
    """One word in the spelling of the keys.

    >>> spell("Sulphate"), spell("aluminum"), spell("β")
    ('sulfate', 'aluminium', 'beta')
    """
    word = word.lower()
    if word.isascii() and "sulph" not in word and "um" not in word:
        return word
    word = word.replace("sulph", "sulf").replace("aluminum", "aluminium")
    if "aesium" not in word:
        word = word.replace("cesium", "caesium")
    return (
        word.replace("β", "beta").replace("α", "alpha").replace("ß", "beta").replace("γ", "gamma")
    )


def key(name: str) -> str:
    """The key of a name.

    >>> key("Di-sodium hydrogenphosphate") == key("disodium hydrogen phosphate")
    True
    """
    return "".join(spell(word) for word in WORD.findall(name.translate(FOLD)))
