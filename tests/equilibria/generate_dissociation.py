"""Writes soplint/equilibria/data/dissociation.csv from a list of reagents.

Run: python tests/equilibria/generate_dissociation.py REAGENTS.csv
The list needs the columns name, synonyms, formula, acid_system. Every row is taken apart by its
formula; where a formula fits several substances the hints below name the acid systems and ions.
"""

from __future__ import annotations

import csv
import sys
from pathlib import Path

from soplint.equilibria.composition import Split, components, find_split, splits
from soplint.equilibria.dissociation import table_rows
from soplint.equilibria.formulas import key, parse_formula

TARGET = Path("soplint/equilibria/data/dissociation.csv")
SOLVENTS = """methanol;ethanol 96 %;ethanol, anhydrous;2-propanol;acetonitrile;acetone;tetrahydrofuran;
1,4-dioxane;diethyl ether;ethyl acetate;toluene;n-hexane;dichloromethane;chloroform;dimethyl sulfoxide;
N,N-dimethylformamide;ethylene glycol;glycerol"""
NEUTRAL = """urea;acetanilide;iodine;polysorbate 20;acrylamide;N,N'-methylenebisacrylamide;sucrose;
D-glucose, anhydrous;D-glucose monohydrate;D-mannitol;formaldehyde 37 %;glutaraldehyde 25 %;
caffeine, anhydrous;phenolphthalein;methyl red;bromocresol green;bromothymol blue;bromophenol blue;
bromocresol purple;thymol blue;phenol red;thymolphthalein;starch, soluble"""
HINTS = {  # name: components, acid systems and strong ions
    "butyric acid": "butyrate",
    "trifluoroacetic acid": "CF3COO-",
    "trichloroacetic acid": "trichloroacetate",
    "chloroacetic acid": "chloroacetate",
    "methanesulfonic acid": "CH3SO3-",
    "fumaric acid": "fumarate",
    "DL-malic acid": "malate",
    "p-toluenesulfonic acid monohydrate": "tosylate-",
    "zinc acetate dihydrate": "acetate;Zn2+",
    "mercury(II) acetate": "acetate;Hg2+",
    "sodium hypochlorite solution": "hypochlorite;Na+",
    "calcium hypochlorite": "hypochlorite;Ca2+",
    "peracetic acid (equilibrium mixture)": "peracetate",
    "acetic anhydride": "acetate",
    "2-mercaptoethanol": "mercaptoethanol",
    "sodium dodecyl sulfate": "dodecyl sulfate-;Na+",
    "cetyltrimethylammonium bromide": "cetyltrimethylammonium+;Br-",
    "guanidine hydrochloride": "guanidinium+;Cl-",
    "tetramethylammonium hydroxide 25 %": "tetramethylammonium+",
    "tetrabutylammonium hydroxide 40 %": "tetrabutylammonium+",
    "potassium hexacyanoferrate(II) trihydrate": "K+;Fe(CN)6 4-",
    "potassium hexacyanoferrate(III)": "K+;Fe(CN)6 3-",
    "methyl orange": "Na+;methyl orange-",
    "eriochrome black T": "Na+;eriochrome black T-",
    "murexide": "ammonia;purpurate-",
    "crystal violet": "crystal violet+;Cl-",
    "methylene blue trihydrate": "methylene blue+;Cl-",
    "ammonium acetate": "acetate;ammonia",
    "ammonium formate": "formate;ammonia",
    "ammonium nitrate": "ammonia;NO3-",
    "ammonium persulfate": "ammonia;S2O8 2-",
    "potassium persulfate": "K+;S2O8 2-",
    "ammonium molybdate tetrahydrate": "ammonia;Mo7O24 6-",
    "sodium borohydride": "Na+;BH4-",
    "sodium azide": "azide;Na+",
    "TEMED": "temed",
    "diethylamine": "diethylamine",
    "hydrogen peroxide 30 %": "peroxide",
}
CAUTIONS = {
    "D-mannitol": "edge: mannitol binds borate, which is not in the model",
    "sodium borohydride": "outside: borohydride reacts with water",
    "peracetic acid (equilibrium mixture)": "outside: an equilibrium mixture with acetic acid",
    "formaldehyde 37 %": "edge: formaldehyde binds amines and sulfite, which is not in the model",
    "iodine": "edge: hydrolysis of iodine is not in the model",
    "HEPES": "",
    "acetic anhydride": "edge: counted as acetic acid after complete hydrolysis",
    "sodium metasilicate": "edge: condensation of silicate is not in the model",
    "calcium hypochlorite": "",
}
COLUMNS = "name synonyms formula key by_formula systems strong_ions state free_protons kind caution source".split()
EXTRA = [  # substances of the pH tables and of daily use that a list of reagents may lack
    ("water", "purified water;demineralised water;distilled water;H2O", "H2O", "neutral"),
    ("carbon dioxide", "", "CO2", ""),
    ("sodium hydrogen maleate", "", "C4H3NaO4", "maleate;Na+"),
    ("disodium maleate", "sodium maleate", "C4H2Na2O4", "maleate;Na+"),
    ("disodium malate", "sodium malate", "C4H4Na2O5", "malate;Na+"),
    ("sodium cacodylate", "", "C2H6AsNaO2", "cacodylate;Na+"),
    ("sodium barbital", "barbital sodium;sodium diethylbarbiturate", "C8H11N2NaO3", "barbital;Na+"),
    ("sodium lactate", "", "C3H5NaO3", "lactate;Na+"),
    ("disodium succinate", "sodium succinate", "C4H4Na2O4", "succinate;Na+"),
    ("imidazole hydrochloride", "", "C3H5N2Cl", "imidazole;Cl-"),
    ("sodium benzoate", "", "C7H5NaO2", "benzoate;Na+"),
    ("sodium chloroacetate", "", "C2H2ClNaO2", "chloroacetate;Na+"),
    ("disodium hydrogen citrate", "", "C6H6Na2O7", "citrate;Na+"),
    ("sodium dihydrogen citrate", "", "C6H7NaO7", "citrate;Na+"),
    ("potassium hydroxide", "", "KOH", "K+"),
    ("sodium iodide", "", "NaI", "Na+;I-"),
    ("sodium bromide", "", "NaBr", "Na+;Br-"),
    ("magnesium acetate", "", "C4H6MgO4", "acetate;Mg2+"),
    ("calcium acetate", "", "C4H6CaO4", "acetate;Ca2+"),
    ("disodium tartrate", "sodium tartrate", "C4H4Na2O6", "tartrate;Na+"),
    ("MES sodium salt", "sodium MES", "C6H12NNaO4S", "mes;Na+"),
    ("TES sodium salt", "", "C6H14NNaO6S", "tes;Na+"),
    ("PIPES disodium salt", "disodium PIPES", "C8H16N2Na2O6S2", "pipes;Na+"),
    ("dipotassium EDTA dihydrate", "", "C10H14K2N2O8·2H2O", "edta;K+"),
    ("tripotassium EDTA dihydrate", "", "C10H13K3N2O8·2H2O", "edta;K+"),
    ("triethanolamine hydrochloride", "", "C6H16ClNO3", "triethanolamine;Cl-"),
    ("ethanolamine hydrochloride", "", "C2H8ClNO", "ethanolamine;Cl-"),
    ("tetramethylammonium chloride", "", "C4H12ClN", "tetramethylammonium+;Cl-"),
    ("choline chloride", "", "C5H14ClNO", "choline+;Cl-"),
    ("sodium 1-hexanesulfonate", "", "C6H13NaO3S", "hexanesulfonate-;Na+"),
    ("thiourea", "", "CH4N2S", "neutral"),
    ("nitrobenzene", "", "C6H5NO2", "neutral"),
    ("sodium pyruvate", "", "C3H3NaO3", "pyruvate;Na+"),
    ("ammonium dichromate", "", "(NH4)2Cr2O7", "ammonia;chromate"),
    ("L-glutamic acid monosodium salt", "monosodium glutamate", "C5H8NNaO4", "glutamate;Na+"),
]


def _named(text: str) -> tuple[str, ...]:
    return tuple(" ".join(piece.split()) for piece in text.split(";") if piece.strip())


def _hinted(formula: str, hint: str) -> Split | None:
    known = {part.name: part for part in components()}
    parts = tuple(known[name] for name in hint.split(";"))
    return next(splits(parse_formula(formula)[0], parts), None)


def _written(split: Split) -> dict[str, object]:
    acids = [(part, n) for part, n in split.parts if part.acid]
    ions = [(part, n) for part, n in split.parts if not part.acid]
    charge = sum(part.charge * n for part, n in ions)
    lowest = sum(_lowest(part.name) * n for part, n in acids)
    highest = sum(part.charge * n for part, n in acids)
    state = min(max(-charge, lowest), highest)
    return {
        "systems": ";".join(f"{part.name} {n}" for part, n in acids),
        "strong_ions": ";".join(f"{part.name} {n}" for part, n in ions),
        "state": state,
        "free_protons": -(charge + state),
    }


def _lowest(name: str) -> int:
    from soplint.equilibria.acids import system

    return system(name).charges[-1]


def _line(row: dict[str, str], used: set[str]) -> dict[str, object]:
    name, formula = row["name"], row["formula"]
    line: dict[str, object] = dict.fromkeys(COLUMNS, "")
    line.update(name=name, synonyms=row["synonyms"].replace("; ", ";"), formula=formula)
    line.update(caution=CAUTIONS.get(name, ""), source="derived from the formula")
    atoms = parse_formula(formula)[0] if formula else {}
    line["key"] = key(atoms)
    line["kind"] = "solvent" if name in _named(SOLVENTS) else "neutral"
    if name not in _named(SOLVENTS) + _named(NEUTRAL) and row.get("hint") != "neutral":
        hint = row.get("hint") or HINTS.get(name)
        split = _hinted(formula, hint) if hint else find_split(atoms, row["acid_system"] or None)
        if split is None:
            raise SystemExit(f"{name} ({formula}): no dissociation found, hint {hint!r}")
        line.update(_written(split), kind="dissociates")
    else:
        line.update(state=0, free_protons=0, source="listed by hand as not dissociating")
    line["by_formula"] = "yes" if line["key"] and line["key"] not in used else ""
    used.add(str(line["key"]))
    return line


FIXED = [  # formulas with parts of atoms, written by hand
    {
        "name": "PIPES sesquisodium salt",
        "formula": "C16H33N4Na3O12S4, halved",
        "systems": "pipes 1",
        "strong_ions": "Na+ 1.5",
        "state": -1.5,
        "free_protons": 0,
        "kind": "dissociates",
        "source": "written by hand from the formula",
    },
]


def _rows(path: str) -> list[dict[str, str]]:
    with open(path, encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    for name, synonyms, formula, hint in EXTRA:
        rows.append(
            {
                "name": name,
                "synonyms": synonyms,
                "formula": formula,
                "acid_system": "",
                "hint": hint,
            }
        )
    have = {row["name"].casefold() for row in rows}
    for form in table_rows("acid_forms.csv"):
        names = [n for n in form["names"].split(";") if n]
        if names and not have & {n.casefold() for n in names}:
            atoms, _ = parse_formula(form["formula"])
            atoms["H"] = atoms.get("H", 0) - int(form["charge"])
            formula = "".join(f"{e}{n}" for e, n in atoms.items() if n)
            rows.append(
                {
                    "name": names[0],
                    "synonyms": ";".join(names[1:]),
                    "formula": formula,
                    "acid_system": form["system"],
                    "hint": form["system"],
                }
            )
    return rows


def main() -> None:
    rows = _rows(sys.argv[1])
    order = sorted(rows, key=lambda row: (not row["acid_system"], "mixture" in row["name"]))
    used: set[str] = set()
    lines = {id(row): _line(row, used) for row in order}
    with TARGET.open("w", encoding="utf-8", newline="") as file:
        file.write(
            "# What one formula unit brings into water. Generated by tests/equilibria/generate_dissociation.py.\n"
            "# systems, strong_ions: 'name count' separated by ;. state: charge on the acid systems as the substance\n"
            "# is written; free_protons: H+ beyond them (negative: OH-); strong charge + state + free_protons = 0.\n"
            "# by_formula: yes when a bare formula means this row. key: atoms without crystal water, sorted.\n"
        )
        writer = csv.DictWriter(file, COLUMNS, lineterminator="\n")
        writer.writeheader()
        writer.writerows(lines[id(row)] for row in rows)
        writer.writerows(FIXED)


if __name__ == "__main__":
    main()
