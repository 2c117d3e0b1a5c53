"""Join neighbouring phrases that belong together.

A name and the amount behind it, strengths behind a comma, one amount for each of several names,
a mass per volume of solvent.
"""

from __future__ import annotations

import re
from dataclasses import replace

from soplint.notation.parts import Condition, Part, Role, kind_of
from soplint.notation.phrases import Dose, Loose, Material, Mixture, ToVolume

# Terminals that may stand between a name and its amount or strength: "Bicine, 8.2 g".
_LINKS = frozenset({"COMMA", "DASH", "COLON", "EQUALS", "SEMICOLON"})
# "the mixture of 4.0 mL": the volume of the whole.
_WHOLE = re.compile(r"(?:mixture|mix|solution|batch|preparation|medium|total) of", re.IGNORECASE)
_LISTED = frozenset({"COMMA", "AND", "SEMICOLON"})
_JOINED = frozenset({"PLUS", "COLON", "AND", "SLASH", "DASH"})
_MOST_PARTS = 20  # things of one ratio that are looked for
_OPPOSITE = {("mass", "amount"), ("amount", "mass"), ("mass", "volume"), ("amount", "volume")}


def join(found: list[Part]) -> list[Part]:
    """The parts of a sentence with neighbours joined."""
    found = _numbered(found)
    found = _shift_strengths(found)
    found = _late_strengths(found)
    found = _name_first(found)
    found = _named_behind(found)
    found = _alternatives(_mixtures(_per_volume(found)))
    return _same_amount(_each_before(_each_behind(found)))


def _numbered(found: list[Part]) -> list[Part]:
    """ "100 µL of level 4", "tube 2": a small number directly behind a name belongs to it."""
    result: list[Part] = []
    for part in found:
        last = result[-1] if result else None
        material = last.material if isinstance(last, Dose) else last
        if (
            isinstance(part, Loose)
            and part.measure.dimension == "number"
            and isinstance(material, Material)
            and material.words
            and material.match is None
            and part.measure.value is not None
            and 0 <= part.measure.value < 100
            and part.measure.places == 0
            and 0 <= part.start - material.end <= 1
        ):
            named = replace(
                material, words=f"{material.words} {part.measure.value:g}", end=part.end
            )
            result[-1] = (
                replace(last, material=named, end=part.end) if isinstance(last, Dose) else named
            )
            continue
        result.append(part)
    return result


def _shift_strengths(found: list[Part]) -> list[Part]:
    """ "20 mM Tris 150 mM NaCl": a strength before a name belongs to that name."""
    result = list(found)
    for index in range(len(result) - 1):
        first, second = result[index], result[index + 1]
        left = first.material if isinstance(first, Dose) else first
        if not (isinstance(left, Material) and isinstance(second, Material)):
            continue
        if second.strengths or not second.words or len(left.strengths) < 2 or left.bracket:
            continue
        moved = left.strengths[-1]
        shorter = replace(left, strengths=left.strengths[:-1], end=moved.start)
        result[index] = replace(first, material=shorter) if isinstance(first, Dose) else shorter
        result[index + 1] = replace(second, strengths=(moved,), start=moved.start)
    return result


def _late_strengths(found: list[Part]) -> list[Part]:
    """ "hydrochloric acid, 37 % w/w, density 1.18 g/mL": facts after a comma join the name."""
    result: list[Part] = []
    for part in found:
        target = _behind_link(result)
        if target is not None:
            target = _named_before(result, target, part)
            merged = _with_fact(result[target], part)
            if merged is not None:
                del result[target + 1 :]
                result[target] = merged
                continue
            shared = _shared(result[target], part)
            if shared is not None:
                result[target], part = shared
        result.append(part)
    return result


def _named_before(result: list[Part], target: int, part: Part) -> int:
    """ "Calcium carbonate, primary standard, M = 100.09 g/mol": the fact is of the known name."""
    loose = part.measure.dimension if isinstance(part, Loose) else ""
    if loose not in ("molar-mass", "density") and not (
        isinstance(part, Material) and not part.words and (part.molar_mass or part.density)
    ):
        return target
    at = target
    while at >= 0 and isinstance(found := result[at], Material):
        if found.match is not None:
            return at
        if found.solution or at < 2 or kind_of(result[at - 1]) != "COMMA":
            break
        at -= 2
    return target


def _shared(target: Part, part: Part) -> tuple[Material, Material] | None:
    """ "mixed stock, 100 mg/L each of Cd and Cu": the strength of the stock, name by name."""
    if not (isinstance(part, Material) and part.each and part.strengths and part.words):
        return None
    if not isinstance(target, Material) or not target.words or target.strengths:
        return None
    stock = replace(target, strengths=part.strengths, end=part.strengths[-1].end)
    start = part.strengths[-1].end
    return stock, replace(part, strengths=(), each=False, start=max(part.start, start))


def _behind_link(result: list[Part]) -> int | None:
    """Index of the material or dose that a fact may still join, or None."""
    index = len(result) - 1
    equals = False
    while (
        index >= 0
        and isinstance(result[index], Role)
        and kind_of(result[index])
        in (
            *_LINKS,
            "LPAR",
        )
    ):
        equals = equals or kind_of(result[index]) == "EQUALS"
        index -= 1
    if equals and index >= 0 and isinstance(result[index], Dose):
        return None  # "100 µL A + 100 µL water = 0.5 mg/mL" claims a result
    if index >= 0 and isinstance(result[index], (Material, Dose)):
        return index
    return None


def _with_fact(target: Part, part: Part) -> Part | None:
    """``target`` with the fact in ``part`` added, or None if it is no fact about it."""
    material = target.material if isinstance(target, Dose) else target
    if not isinstance(material, Material) or not material.words:
        return None
    if isinstance(target, Dose) and material.is_water:
        return None  # "10 mL bleach + 90 mL water, 0.5 %" speaks of the mixture
    if isinstance(part, Loose) and part.measure.dimension == "molar-mass":
        changed = replace(material, molar_mass=material.molar_mass or part.measure, end=part.end)
    elif isinstance(part, Loose) and part.measure.dimension == "density":
        changed = replace(material, density=material.density or part.measure, end=part.end)
    elif isinstance(part, Material) and not part.words and (part.density or part.molar_mass):
        changed = replace(
            material,
            strengths=material.strengths + part.strengths,
            bracket=material.bracket + part.bracket,
            density=material.density or part.density,
            molar_mass=material.molar_mass or part.molar_mass,
            end=part.end,
        )
    elif isinstance(part, Material) and not part.words and (part.strengths or part.ph):
        stock = isinstance(target, Dose) and target.amount.dimension == "volume"
        if stock and part.strengths and not material.strengths:
            changed = replace(material, strengths=part.strengths, ph=part.ph, end=part.end)
        elif isinstance(target, Dose) and part.strengths:
            changed = replace(material, finals=material.finals + part.strengths, end=part.end)
        else:
            changed = replace(
                material,
                strengths=material.strengths + part.strengths,
                ph=material.ph or part.ph,
                bracket=material.bracket + part.bracket,
                finals=material.finals + part.finals,
                molar_mass=material.molar_mass or part.molar_mass,
                end=part.end,
            )
    elif isinstance(part, Condition) and (material.ph is not None or material.density is not None):
        changed = replace(material, temperature=part.loose.measure, end=part.end)
    else:
        return None
    return replace(target, material=changed) if isinstance(target, Dose) else changed


def _name_first(found: list[Part]) -> list[Part]:
    """ "KBr 12 g (100 mM)": a name, perhaps a separator, then its amount."""
    result: list[Part] = []
    for part in found:
        nameless = isinstance(part, Dose) and (part.material is None or not part.material.words)
        if isinstance(part, Dose) and (nameless or _of_stock(part)):
            target = _behind_link(result)
            if target is not None and _takes_amount(result, target, nameless):
                material = result[target]
                assert isinstance(material, Material)
                titled = any(kind_of(role) in ("COLON", "DASH") for role in result[target + 1 :])
                del result[target:]
                if _WHOLE.fullmatch(material.words) and part.amount.dimension == "volume":
                    result.append(ToVolume(part.start, part.end, part.amount, said_final=True))
                else:
                    result.append(_named(part, material, titled))
                continue
        result.append(part)
    return result


def _of_stock(dose: Dose) -> bool:
    """ "NaCl 100 mM: 2 mL of 5 M stock": the stock is one of what stands before it."""
    material = dose.material
    return (
        material is not None
        and material.words.lower() in ("stock", "stock solution")
        and bool(material.strengths)
    )


def _takes_amount(result: list[Part], index: int, nameless: bool = True) -> bool:
    """Whether the material at ``index`` still waits for its amount."""
    part = result[index]
    if not isinstance(part, Material) or not part.words:
        return False
    if not nameless and not (part.strengths and part.match):
        return False
    if part.words.lower().endswith(" of") and not _WHOLE.fullmatch(part.words):
        return False
    before = result[index - 1] if index else None
    return not (isinstance(before, Role) and before.kind in ("IN", "WITH", "INTO", "TO", "FROM"))


def _named(dose: Dose, material: Material, titled: bool) -> Dose:
    """The dose with the name that stood before it; remarks behind the amount are kept.

    "3 % H2O2: 10 mL of 30 %" and "2 % NaN3: 2 g": what stands before the name is aimed at.
    """
    behind = dose.material
    own = bool(behind is not None and behind.strengths)
    if material.strengths and (own or (titled and dose.amount.dimension in ("mass", "amount"))):
        stock = behind.strengths if behind is not None else ()
        material = replace(material, finals=material.finals + material.strengths, strengths=stock)
    if behind is not None:
        material = replace(
            material,
            bracket=material.bracket + behind.bracket,
            finals=material.finals + behind.finals,
            molar_mass=material.molar_mass or behind.molar_mass,
        )
    return replace(dose, material=material, start=material.start)


# --- several quantities for one name ------------------------------------------------------------


def _alternatives(found: list[Part]) -> list[Part]:
    """ "1, 2 and 5 mL of the standard": one of them each time."""
    result: list[Part] = []
    for part in found:
        named = isinstance(part, Dose) and part.material is not None and bool(part.material.words)
        if isinstance(part, Dose) and (named or part.material is None):
            others: list[Dose] = []
            at = len(result)
            while at >= 2 and kind_of(result[at - 1]) in ("COMMA", "AND", "OR"):
                before = result[at - 2]
                if not isinstance(before, Dose) or before.material is not None or before.each:
                    break
                if before.amount.dimension != part.amount.dimension:
                    break
                own = replace(part.material, finals=()) if part.material is not None else None
                first = replace(before, alternatives=(), start=before.amount.start)
                listed = (*before.alternatives, first)
                if own is not None:
                    listed = tuple(replace(other, material=own) for other in listed)
                others[:0] = listed
                at -= 2
            if (named and others) or len(others) > 1:
                del result[at:]
                start = others[0].start
                part = replace(part, start=start, alternatives=(*others, *part.alternatives))
        result.append(part)
    return result


def _mixtures(found: list[Part]) -> list[Part]:
    """ "acetonitrile + water (60 + 40)": a ratio in brackets of all things that are joined."""
    result: list[Part] = []
    for part in found:
        result.append(part)
        _ratio_before(result)
        if not isinstance(part, Material):
            continue
        ratio = next((m for m in part.bracket if m.dimension == "ratio"), None)
        if ratio is None or len(ratio.parts) < 2:
            continue
        count = 2 * len(ratio.parts) - 1
        joined = result[-count:]
        if len(joined) < count or not all(kind_of(p) in _JOINED for p in joined[1::2]):
            continue
        things = [p for p in joined[::2] if isinstance(p, Material) and p.words]
        if len(things) == len(ratio.parts):
            rest = tuple(m for m in part.bracket if m is not ratio)
            things[-1] = replace(things[-1], bracket=rest)
            result[-count:] = [Mixture(things[0].start, part.end, ratio, tuple(things))]
    return result


def _ratio_before(result: list[Part]) -> None:
    """ "7:3 methanol:water", "7:3 mixture of methanol and water": the ratio stands first."""
    at = len(result) - 1
    things: list[Material] = []
    while at >= 1 and len(things) < _MOST_PARTS:
        part, joint = result[at], result[at - 1]
        if not isinstance(part, Material) or not part.words or part.strengths:
            return
        things.insert(0, part)
        if isinstance(joint, Loose):
            ratio = joint.measure
            if ratio.dimension == "ratio" and len(ratio.parts) == len(things) > 1:
                result[at - 1 :] = [Mixture(joint.start, things[-1].end, ratio, tuple(things))]
            return
        if kind_of(joint) not in _JOINED:
            return
        at -= 2


# --- one quantity for several names ------------------------------------------------------------


def _each_before(found: list[Part]) -> list[Part]:
    """ "5 g each of NaCl, KCl and LiCl", "10 mM each of A and B": the names that follow take it."""
    result: list[Part] = []
    giver: Dose | Material | None = None
    for part in found:
        last = result[-1] if result else None
        listed = kind_of(last) in _LISTED and giver is not None
        if listed and isinstance(part, Material) and part.words and _may_take(giver, part):
            part = _given(giver, part)
        elif isinstance(part, Dose) and part.each and part.material and part.material.words:
            giver = part
        elif isinstance(part, Material) and part.each and part.words:
            giver = part
        elif not (isinstance(part, Role) and part.kind in _LISTED):
            giver = None
        result.append(part)
    return result


def _may_take(giver: Dose | Material | None, material: Material) -> bool:
    return isinstance(giver, Dose) or not material.strengths


def _given(giver: Dose | Material | None, material: Material) -> Part:
    """The material with the quantity of ``giver``."""
    if isinstance(giver, Dose):
        return replace(giver, material=material, start=material.start, end=material.end)
    assert giver is not None
    return replace(material, strengths=giver.strengths)


def _each_behind(found: list[Part]) -> list[Part]:
    """ "NaCl, KCl and MgCl2 (5 g each)", "NaCl and KCl, 5 g each": the names before take it."""
    result: list[Part] = []
    for part in found:
        part = _bracket_dose(part)
        result.append(part)
        dose = part if isinstance(part, Dose) and part.each else None
        if dose is None or dose.material is None or dose.start != dose.material.start:
            continue
        at = len(result) - 2
        while at >= 1 and kind_of(result[at]) in _LISTED:
            before = result[at - 1]
            if not isinstance(before, Material) or not before.words or before.strengths:
                break
            result[at - 1] = replace(dose, material=before, start=before.start, end=before.end)
            at -= 2
    return result


def _bracket_dose(part: Part) -> Part:
    """ "MgCl2 (5 g each)": an amount in brackets that several names share is a dose."""
    if not isinstance(part, Material) or not part.each or part.strengths or not part.words:
        return part
    amounts = [m for m in part.bracket if m.dimension in ("mass", "volume", "amount")]
    if len(amounts) != 1:
        return part
    rest = tuple(m for m in part.bracket if m is not amounts[0])
    return Dose(part.start, part.end, amounts[0], replace(part, bracket=rest), each=True)


# --- equal amounts, solvents, late names --------------------------------------------------------


def _same_amount(found: list[Part]) -> list[Part]:
    """ "0.3 mol sucrose, 102.7 g": the same amount in another unit."""
    result: list[Part] = []
    for part in found:
        last = result[-1] if result else None
        before = result[-2] if len(result) > 1 else None
        if (
            isinstance(part, Dose)
            and part.material is None
            and kind_of(last) in ("COMMA", "EQUALS")
            and isinstance(before, Dose)
            and before.material is not None
            and not before.same
            and (before.amount.dimension, part.amount.dimension) in _OPPOSITE
            and "amount" in (before.amount.dimension, part.amount.dimension)
        ):
            result[-2:] = [replace(before, same=(part.amount,), end=part.end)]
            continue
        result.append(part)
    return result


def _per_volume(found: list[Part]) -> list[Part]:
    """ "3 g / 25 mL water", "25 g casein --> 500 mL water": what follows the sign is the solvent."""
    result = list(found)
    for index in range(1, len(found) - 1):
        kind = kind_of(found[index])
        left, right = found[index - 1], found[index + 1]
        if kind not in ("SLASH", "ARROW", "PER") or not isinstance(left, Dose):
            continue
        if not isinstance(right, Dose) or right.amount.dimension != "volume":
            continue
        if left.amount.dimension not in ("mass", "amount"):
            continue
        solvent = right.material is None or right.material.is_water or kind == "SLASH"
        if solvent:
            role = result[index]
            assert isinstance(role, Role)
            result[index] = replace(role, kind="IN")
            if left.material is None:
                result[index - 1] = replace(left, material=Material(left.start, left.end, ""))
    return result


def _named_behind(found: list[Part]) -> list[Part]:
    """ "20 mM = 2.4 g KBr in 1 L", "0.5 M -> 59.5 g/L KBr": a strength whose name follows the sign."""
    result = list(found)
    for index in range(1, len(found) - 1):
        if kind_of(found[index]) not in ("EQUALS", "ARROW"):
            continue
        left, right = found[index - 1], found[index + 1]
        named = right.material if isinstance(right, Dose) else right
        if not (isinstance(left, Material) and not left.words and left.strengths):
            continue
        if isinstance(named, Material) and named.words and not named.is_water:
            result[index - 1] = replace(
                left, words=named.words, match=named.match, solution=named.solution
            )
    return result
