"""Writes ``data/index.json``, the prepared form of the reagent and synonym files.

Run ``python -m soplint.substances.prepare`` after any change of a csv file of the room; a test
compares the stored index with a fresh one.
"""

from __future__ import annotations

import json
import os
from dataclasses import astuple
from typing import Any

from .elements import DATA
from .formula import FormulaError, hill, parse_formula
from .naming import FOLD, WORD, key, spell
from .rows import Row, rows, without_water
from .stems import stem
from .tables import read_table

FORMULA = "f"
_KINDS = {"generic": "g", "none": "n", "buffer-name": "b", "concentrated": "c"}
_SHORTEST_SLIP = 3  # letters of a formula whose capitals may be wrong: "Kcl", not "ki"
_NO_SLIP = {"cao", "mgo", "cuo", "coo", "hno", "cos", "pbo", "hgo", "zno"}

Entry = dict[str, Any]


def _targets(names: dict[str, int], stems: dict[str, list[int]], text: str) -> list[int]:
    """Substances (0 and up) or families (-1 and down) that a synonym stands for."""
    targets: list[int] = []
    missing: list[str] = []
    for name in (part.strip() for part in text.split(";")):
        if not name:
            continue
        if key(name) in stems and stem(name) == name:
            targets.extend(stems[key(name)])
        elif name in names:
            targets.append(names[name])
        else:
            missing.append(name)
    if missing:
        raise ValueError(f"synonyms.csv names {missing}, which no reagent file holds")
    return targets


def _family_index(all_rows: tuple[Row, ...]) -> dict[str, list[int]]:
    families: dict[str, list[int]] = {}
    for number, row in enumerate(all_rows):
        families.setdefault(row.substance.family, []).append(number)
    for members in families.values():
        members.sort(key=lambda number: _order(all_rows[number]))
    return families


def _order(row: Row) -> tuple[int, float]:
    """Solids first, fewest water first; then strengths in file order, then the undiluted."""
    substance = row.substance
    if substance.state == "solid":
        assay = 0.5 if substance.strength and substance.strength < 95 else 0.0
        return 0, substance.hydrate + assay
    return (2 if substance.name.endswith(", pure") else 1), 0.0


def _add(entries: dict[str, Entry], name: str, target: int) -> None:
    entry = entries.setdefault(key(name), {"targets": []})
    if target not in entry["targets"]:
        entry["targets"].append(target)


def _is_formula(name: str) -> bool:
    try:
        parse_formula(name)
    except FormulaError:
        return False
    return True


def _add_formulas(
    entries: dict[str, Entry], all_rows: tuple[Row, ...], place: dict[str, int]
) -> dict[str, list[int]]:
    """Composition to families; and the written formulas as names, for slips of capitals."""
    compositions: dict[str, list[int]] = {}
    for row in all_rows:
        substance = row.substance
        if substance.formula is None:
            continue
        target = place[substance.family]
        anhydrous = without_water(substance.formula)
        families = compositions.setdefault(hill(parse_formula(anhydrous).elements), [])
        if target not in families:
            families.append(target)
        written = anhydrous.lower()
        letters = sum(char.isalpha() for char in written)
        plain = "·" not in written and key(anhydrous) == written
        if letters >= _SHORTEST_SLIP and written not in _NO_SLIP and plain:
            entry = entries.setdefault(written, {"targets": [], "kind": FORMULA, "exact": []})
            if entry.get("kind") == FORMULA and target not in entry["targets"]:
                entry["targets"].append(target)
                entry["exact"].append(anhydrous)
    return compositions


def _add_synonyms(
    entries: dict[str, Entry], names: dict[str, int], stems: dict[str, list[int]]
) -> None:
    for record in read_table("synonyms.csv"):
        name = record["synonym"]
        entry: Entry = {"targets": _targets(names, stems, record["names"])}
        if record["kind"] != "name":
            entry["kind"] = _KINDS[record["kind"]]
        if record["case"] == "exact":
            entry["exact"] = entries.get(key(name), {}).get("exact", []) + [name]
        entries[key(name)] = entry


def _firsts(texts: list[str]) -> list[str]:
    """First words of all names; "disodium" may also be written "di-sodium"."""
    firsts = set()
    for text in texts:
        first = spell((WORD.findall(text.translate(FOLD)) or [""])[0])
        firsts.add(first)
        for prefix in ("di", "tri", "tetra", "mono", "penta", "hexa"):
            if first.startswith(prefix) and len(first) > len(prefix):
                firsts.add(prefix)
    return sorted(firsts - {""})


def build() -> dict[str, Any]:
    """The index as it is stored."""
    all_rows = rows()
    families = _family_index(all_rows)
    place = {family: -1 - number for number, family in enumerate(families)}
    names = {row.substance.name: number for number, row in enumerate(all_rows)}
    entries: dict[str, Entry] = {}
    stems: dict[str, list[int]] = {}
    for row in all_rows:
        target = place[row.substance.family]
        base = stem(row.substance.name)
        for name in (base, *row.synonyms):
            _add(entries, stem(name), target)
        known = stems.setdefault(key(base), [])
        if target not in known:
            known.append(target)
    compositions = _add_formulas(entries, all_rows, place)
    _add_synonyms(entries, names, stems)
    entries.pop("", None)
    written = [name for row in all_rows for name in (row.substance.name, *row.synonyms)]
    written += [record["synonym"] for record in read_table("synonyms.csv")]
    return {
        "substances": [astuple(row.substance) for row in all_rows],
        "stems": {
            family: stem(all_rows[members[0]].substance.name)
            for family, members in families.items()
        },
        "families": list(families.values()),
        "names": {name: _compact(entry) for name, entry in sorted(entries.items())},
        "firsts": _firsts(written),
        "compositions": dict(sorted(compositions.items())),
    }


def _compact(entry: Entry) -> int | list[Any]:
    """An entry as stored: one number for the ordinary case."""
    if len(entry["targets"]) == 1 and len(entry) == 1:
        return int(entry["targets"][0])
    return [entry["targets"], entry.get("kind", ""), entry.get("exact", [])]


def _lines(value: Any) -> str:
    """A list or table with one element a line, so that changes show as lines."""
    if isinstance(value, dict):
        items = [f"{_json(name)}:{_json(content)}" for name, content in value.items()]
        return "{\n" + ",\n".join(items) + "\n}"
    return "[\n" + ",\n".join(map(_json, value)) + "\n]"


def _json(value: Any) -> str:
    return json.dumps(value, ensure_ascii=False, separators=(",", ":"))


def text() -> str:
    """The index file as text."""
    tables = [f"{_json(name)}:{_lines(value)}" for name, value in build().items()]
    return "{" + ",\n".join(tables) + "}\n"


if __name__ == "__main__":
    with open(os.path.join(DATA, "index.json"), "w", encoding="utf-8") as file:
        file.write(text())
