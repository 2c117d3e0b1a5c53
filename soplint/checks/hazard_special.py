"""Single substances that need controls of their own."""

from __future__ import annotations

import re
from collections.abc import Iterator

from soplint.bench import Bench
from soplint.bench.contact import HOT
from soplint.bench.contents import Content
from soplint.bench.hazard_tables import classes_of
from soplint.bench.streams import asides
from soplint.bench.vessels import Vessel, vessels
from soplint.checks.hazard_pairs import speak
from soplint.checks.hazard_words import at, hazard, protection
from soplint.checks.registry import Judgement, rule
from soplint.notation.phrases import Dose, Material, Sentence
from soplint.substances.model import Substance

Spot = tuple[Sentence, int, int, Substance, Material]


def named(bench: Bench, klass: str) -> Iterator[Spot]:
    """Every mention of a substance of a class in a sentence that does something."""
    for read in bench.blocks:
        if read.block.kind == "heading":
            continue
        for sentence in read.sentences:
            for phrase in sentence.phrases:
                material = phrase.material if isinstance(phrase, Dose) else phrase
                if not isinstance(material, Material) or material.match is None:
                    continue
                substance = material.match.substances[0]
                if klass in classes_of(substance) and not _warned(sentence, phrase.start):
                    yield sentence, phrase.start, phrase.end, substance, material


def _warned(sentence: Sentence, start: int) -> bool:
    return any(a <= start < b for a, b in asides(sentence.text.chars))


def held(bench: Bench, klass: str) -> Iterator[tuple[Vessel, Content]]:
    """Contents of vessels that belong to a class."""
    for vessel in vessels(bench):
        for content in vessel.contents:
            if klass in content.classes and not content.stream:
                yield vessel, content


@rule("hazards.hydrofluoric-controls-named")
def hydrofluoric_controls(bench: Bench) -> Iterator[Judgement]:
    """Work with hydrofluoric acid names calcium gluconate, gloves, plastic ware and a second person."""
    words = protection(bench).words
    wanted = {
        "calcium gluconate": r"gluconate|calcium gel|ca gel",
        "gloves": r"glove",
        "plastic ware": r"plastic|polyethylene|polypropylene|ptfe|pfa|fluoropolymer|teflon|\bpe\b|\bpp\b",
        "a second person": r"two persons|second person|not alone|never alone|two people|buddy|accompanied",
    }
    missing = [name for name, pattern in wanted.items() if not re.search(pattern, words)]
    if not missing:
        return
    for _, content in held(bench, "hydrofluoric"):
        # the antidote and plastic ware decide; gloves and company are often told elsewhere
        grave = "calcium gluconate" in missing or "plastic ware" in missing
        yield at(
            "hazards.hydrofluoric-controls-named",
            "critical" if grave else "remark",
            content,
            f"hydrofluoric acid is used and the text does not name {', '.join(missing)}",
            working="looked for in the whole text (Prudent Practices in the Laboratory, from memory)",
        )
        return


_WASH_DOWN = re.compile(r"wash-?down|perchloric (?:acid )?(?:fume )?(?:hood|cupboard)|rinsed hood")


@rule("hazards.perchloric-controls-named")
def perchloric_controls(bench: Bench) -> Iterator[Judgement]:
    """Hot or concentrated perchloric acid is used in a wash-down hood and away from organic matter."""
    found = list(speak(bench, "hazards.perchloric-controls-named"))
    yield from found
    if found or _WASH_DOWN.search(protection(bench).words):
        return
    for vessel, content in held(bench, "perchloric"):
        strong = (content.percent or 0.0) > 72.0
        hot = HOT.search(vessel.words) and (content.percent or 0.0) >= 20.0
        if strong or hot:
            yield at(
                "hazards.perchloric-controls-named",
                "critical",
                content,
                "perchloric acid is heated or above 72 % and no wash-down hood is named",
                working="perchlorates collect in an ordinary hood (Bretherick's Handbook, from memory)",
            )
            return


_KEEPS = re.compile(
    r"\b(?:store|stored|storage|keep|keeps|kept|overnight|shelf life|stable|months?|weeks?|days)\b",
    re.I,
)
_AT_ONCE = re.compile(
    r"\b(?:discard|destroy|acidif|same day|at once|fresh|immediately|do not (?:store|keep))", re.I
)


@rule("hazards.ammoniacal-silver-destroyed")
def ammoniacal_silver(bench: Bench) -> Iterator[Judgement]:
    """Silver in ammonia is made fresh and destroyed with acid after use, never kept."""
    for vessel in vessels(bench):
        kinds = {k for c in vessel.contents for k in c.classes}
        if not {"silver", "ammonia"} <= kinds or vessel.kind == "stream":
            continue
        for sentence in vessel.sentences:
            found = _KEEPS.search(sentence.text.chars)
            if found and not _AT_ONCE.search(vessel.words) and not _warned(sentence, found.start()):
                yield hazard(
                    "hazards.ammoniacal-silver-destroyed",
                    "critical",
                    sentence.text,
                    found.start(),
                    found.end(),
                    "silver in ammonia is kept: explosive silver nitride can form",
                    working="the vessel holds silver salt and ammonia and is stored (Bretherick's Handbook, from memory)",
                )
                break


_DRIES = re.compile(
    r"\b(?:dry|dried|drying|oven|desiccat\w*|evaporate\w* to dryness|105 ?°)\b", re.I
)
_WET = re.compile(r"\b(?:wet|wetted|moist|keep.{0,20}water|never dry|not (?:be )?dr)", re.I)


@rule("hazards.picric-acid-wet")
def picric_wet(bench: Bench) -> Iterator[Judgement]:
    """Picric acid and its like are kept wet and never dried."""
    for sentence, start, end, substance, _ in named(bench, "picric"):
        if _DRIES.search(sentence.text.chars) and not _WET.search(sentence.text.chars):
            yield hazard(
                "hazards.picric-acid-wet",
                "critical",
                sentence.text,
                start,
                end,
                f"{substance.name.split(' (')[0]} is dried: dry it explodes by shock, friction or heat",
                working="substance with a drying step in one sentence (Prudent Practices, from memory)",
            )


_EVAPORATES = re.compile(
    r"\b(?:evaporat\w*|distil\w*|to dryness|rotary|concentrate\w* to|reflux\w*)\b", re.I
)
_TESTED = re.compile(
    r"\bperoxide|inhibit|stabili[sz]ed|bht|date of opening|opened on|test strip", re.I
)


@rule("hazards.peroxide-formers-tested")
def peroxide_formers(bench: Bench) -> Iterator[Judgement]:
    """Ethers that form peroxides are tested before they are evaporated or kept long."""
    if _TESTED.search(protection(bench).words):
        return
    for sentence, start, end, substance, _ in named(bench, "peroxide-former"):
        if _EVAPORATES.search(sentence.text.chars):
            yield hazard(
                "hazards.peroxide-formers-tested",
                "major",
                sentence.text,
                start,
                end,
                f"{substance.name} is evaporated and no peroxide test or stabiliser is named",
                working="ethers form explosive peroxides that stay in the residue (Prudent Practices, Table 3.9)",
            )


_TIGHT = re.compile(r"\b(?:tight\w*|sealed|airtight|hermetic\w*|closed bottle|screw cap)\b", re.I)
_VENTED = re.compile(r"\bvent", re.I)


@rule("hazards.formic-acid-vented")
def formic_vented(bench: Bench) -> Iterator[Judgement]:
    """Concentrated formic acid stands under a vented cap: it gives off carbon monoxide."""
    for sentence, start, end, _, material in named(bench, "formic"):
        strong = [
            m.base * 100
            for m in (*material.strengths, *material.bracket)
            if m.dimension == "fraction" and m.basis in (None, "w/w")
        ]
        if max(strong, default=0.0) < 85 or not _KEEPS.search(sentence.text.chars):
            continue
        if _TIGHT.search(sentence.text.chars) and not _VENTED.search(protection(bench).words):
            yield hazard(
                "hazards.formic-acid-vented",
                "minor",
                sentence.text,
                start,
                end,
                "concentrated formic acid is stored tightly closed: carbon monoxide builds up pressure",
                working="85 % or more decomposes slowly (supplier safety data sheets, from memory)",
            )


_MIXTURES = re.compile(
    r"\b(?:chromic[- ](?:sulfuric )?acid|chromosulfuric acid|piranha|chrom(?:ic|ate)[- ]sulfuric)\b",
    re.I,
)
_AQUA = re.compile(r"\baqua regia\b", re.I)
_REASON = re.compile(
    r"\bonly (?:way|where|when|if)|because|justif|risk assessment|substitut|replaced by|instead|HFL-RA",
    re.I,
)


@rule("hazards.cleaning-mixture-justified")
def cleaning_mixture(bench: Bench) -> Iterator[Judgement]:
    """Chromic acid and piranha are not used for cleaning without a reason; aqua regia is not kept."""
    words = protection(bench).words
    for read in bench.blocks:
        chars = read.block.text.chars
        found = _MIXTURES.search(chars)
        kept = _AQUA.search(chars) if _KEEPS.search(chars) else None
        hit = found or kept
        if hit is None or read.table is not None or _REASON.search(words):
            continue
        if any(a <= hit.start() < b for a, b in asides(chars)):
            continue
        yield hazard(
            "hazards.cleaning-mixture-justified",
            "major",
            read.block.text,
            hit.start(),
            hit.end(),
            f"{hit.group().lower()}: a cleaning mixture that is discouraged; no reason is given",
            working="propose a detergent (Prudent Practices in the Laboratory, from memory)",
        )
        return
