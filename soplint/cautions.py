"""The cautions that stand on every record: what a review by calculation cannot tell."""

from __future__ import annotations

CAUTIONS = (
    "This is a check of written statements by calculation; it does not replace safety data sheets, "
    "local rules, risk assessment, validation or review by a qualified person.",
    "No finding means that no listed rule fired: the coverage tells what was read and what was not.",
    "Pairs of substances that are not in the table were not assessed; "
    "that says nothing about whether they may meet.",
    "Heat, gas and pH figures are estimates for review.",
)
