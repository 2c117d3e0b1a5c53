"""Tables of characters: what a printed character is read as.

``READ_AS`` maps one source character to the characters it is read as, ``ENTITIES`` and
``COMMANDS`` do the same for the usual HTML entities and LaTeX commands.
"""

from __future__ import annotations

import unicodedata

SPACES = "\t\x0c\u00a0\u1680\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u2007\u2008\u2009\u200a"
SPACES += "\u2028\u2029\u202f\u205f\u3000\x85"
# Soft hyphen, zero-width characters, bidirectional controls, word joiner, variation selectors.
DROPPED = "\u00ad\u180e\u200b\u200c\u200d\u200e\u200f\u202a\u202b\u202c\u202d\u202e\u2060\u2061"
DROPPED += "\u2062\u2063\u2064\u2066\u2067\u2068\u2069\ufeff\ufe0e\ufe0f"
CONTROLS = "".join(map(chr, (*range(1, 9), 11, *range(14, 32), *range(127, 133), *range(134, 160))))
SUBSCRIPTS = dict(zip("₀₁₂₃₄₅₆₇₈₉₊₋₌₍₎", "0123456789+-=()", strict=True))
SUPERSCRIPTS = dict(zip("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻ⁿ", "0123456789+-n", strict=True))
RAISED_DIGITS = dict(zip("0123456789", "⁰¹²³⁴⁵⁶⁷⁸⁹", strict=True))

_LETTERS = {
    "\u03bc": "µ",  # Greek mu
    "\u2212": "-",  # minus sign
    "\u2010": "-",  # hyphen
    "\u2011": "-",  # non-breaking hyphen
    "\ufe63": "-",
    "\u2012": "–",  # figure dash
    "\u00ba": "°",  # masculine ordinal, often typed for the degree sign
    "\u02da": "°",  # ring above
    "\u2218": "°",  # ring operator
    "\u22c5": "·",  # dot operator
    "\u2219": "·",  # bullet operator
    "\u2027": "·",  # hyphenation point
    "\u30fb": "·",  # katakana middle dot
    "\u0387": "·",  # Greek ano teleia
    "\u2044": "/",  # fraction slash
    "\u2215": "/",  # division slash
    "\u2715": "×",
    "\u2a2f": "×",
    "\u223c": "~",  # tilde operator
    "\u2217": "*",  # asterisk operator
    "\u2103": "°C",
    "\u2126": "Ω",
    "\u212a": "K",
}


def _compatibility() -> dict[str, str]:
    """Full-width forms, ligatures and squared units, read as Unicode's own decomposition."""
    ranges = (range(0xFF01, 0xFF5F), range(0xFB00, 0xFB07), range(0x3380, 0x33E0))
    codes = [code for part in ranges for code in part]
    read = {chr(code): unicodedata.normalize("NFKC", chr(code)) for code in codes}
    return {
        char: plain.replace("\u03bc", "µ").replace("\u2044", "/") for char, plain in read.items()
    }


READ_AS: dict[str, str] = {
    **_compatibility(),
    **dict.fromkeys(SPACES, " "),
    **dict.fromkeys(DROPPED + CONTROLS, ""),
    **SUBSCRIPTS,
    **_LETTERS,
}

ENTITIES: dict[str, str] = {
    "amp": "&", "lt": "<", "gt": ">", "quot": '"', "apos": "'", "nbsp": " ", "thinsp": " ",
    "ensp": " ", "emsp": " ", "micro": "µ", "mu": "µ", "deg": "°", "times": "×", "minus": "-",
    "plusmn": "±", "middot": "·", "sdot": "·", "bull": "•", "ndash": "–", "mdash": "—",
    "frac12": "½", "frac14": "¼", "frac34": "¾", "sup1": "¹", "sup2": "²", "sup3": "³",
    "alpha": "α", "beta": "β", "gamma": "γ", "Delta": "Δ", "lambda": "λ", "le": "≤", "ge": "≥",
    "asymp": "≈", "rarr": "→", "larr": "←", "hellip": "…", "lsquo": "‘", "rsquo": "’",
    "ldquo": "“", "rdquo": "”", "shy": "", "zwnj": "", "zwj": "",
}  # fmt: skip

# LaTeX commands by their name; those that only set type are dropped.
COMMANDS: dict[str, str] = {
    "mu": "µ", "micro": "µ", "times": "×", "cdot": "·", "circ": "°", "degree": "°", "celsius": "°C",
    "space": " ", "quad": " ", "qquad": " ", "thinspace": " ", "pm": "±", "approx": "≈",
    "sim": "~", "simeq": "≈", "leq": "≤", "le": "≤", "geq": "≥", "ge": "≥", "lt": "<", "gt": ">",
    "to": "→", "rightarrow": "→", "longrightarrow": "→", "rightleftharpoons": "⇌", "div": "/",
    "alpha": "α", "beta": "β", "gamma": "γ", "delta": "δ", "lambda": "λ", "varepsilon": "ε",
    "epsilon": "ε", "Delta": "Δ", "Omega": "Ω", "Sigma": "Σ", "sum": "Σ", "bullet": "•",
    "mathrm": "", "text": "", "textrm": "", "textbf": "", "textit": "", "mathbf": "", "mathit": "",
    "mathsf": "", "mathtt": "", "operatorname": "", "rm": "", "bf": "", "it": "", "ce": "",
    "textsubscript": "", "textsuperscript": "", "left": "", "right": "", "displaystyle": "",
    "ensuremath": "", "mbox": "", "unit": "", "si": "", "SI": "", "num": "", "big": "", "Big": "",
}  # fmt: skip
