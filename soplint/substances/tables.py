"""Reading the csv files of the room; the csv module is loaded only when one is wanted."""

from __future__ import annotations

from .elements import read_data


def read_table(name: str) -> list[dict[str, str]]:
    """A data file as dictionaries; lines that open with "#" are its explanation."""
    import csv

    lines = [line for line in read_data(name).splitlines() if not line.startswith("#")]
    return list(csv.DictReader(lines))
