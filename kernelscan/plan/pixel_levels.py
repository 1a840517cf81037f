"""How many pixels a metre a picture needs for what it is to show, as levels of a named edition of a standard.

An edition is always named with its level, since the editions differ: 250 px/m is a name in one and a number of seven
in the next. The figures are carried over from public pages that cite the standard; check them against a bought copy
before you rely on them. A density reached says nothing about compliance with a standard.
"""

__all__ = ["PIXEL_LEVELS", "density_of_level"]

PIXEL_LEVELS: dict[str, dict[str, float]] = {
    # Source: IEC 62676-4:2014, as read on two or more independent public pages.
    "IEC 62676-4:2014": {
        "monitor": 12.5,
        "detect": 25.0,
        "observe": 62.5,
        "recognise": 125.0,
        "identify": 250.0,
        "inspect": 1000.0,
    },
    # Source: IEC 62676-4:2025, the numbers as read on one public page. The names that go with them are not
    # confirmed, so that its levels are named by their numbers.
    "IEC 62676-4:2025": {
        "20": 20.0,
        "40": 40.0,
        "80": 80.0,
        "125": 125.0,
        "250": 250.0,
        "500": 500.0,
        "1500": 1500.0,
    },
}
"""Editions, their levels, and the pixels a metre of each."""


def density_of_level(level: str) -> float:
    """Return the pixels a metre of a level such as ``IEC 62676-4:2014 identify``; ``KeyError`` if there is none.

    Capitals and the amount of space do not matter.
    """
    edition, _, name = " ".join(level.split()).rpartition(" ")
    editions = {key.casefold(): levels for key, levels in PIXEL_LEVELS.items()}
    return editions[edition.casefold()][name.casefold()]
