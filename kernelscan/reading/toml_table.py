"""One table of a TOML file: its values are asked for one by one, and what is wrong with them is noted, not raised.

So a person learns of all faults at once. A value that is missing or wrong comes back as ``None``; ``unsound`` tells
the two apart. Each fault is one line that begins with the place of the key, such as ``device[2].farthest_m``, counted
from 1.
"""

import re
from collections.abc import Iterable, Mapping, Sequence, Set
from difflib import get_close_matches
from math import isfinite
from typing import TypeVar

from kernelscan.plain_text import plain_text
from kernelscan.reading.device_keys import Quantity

__all__ = ["Table", "shown"]

Word = TypeVar("Word", bound=str)

LEAST, MOST = 1e-9, 1_000_000_000
"""Sizes beyond these are slips; between them no formula overflows."""

LONGEST = 60
"""Signs that are shown of what stands in the file."""


class Table:
    """A table, its place in the file, and the list to which its faults go.

    Parameters
    ----------
    place
        How to name the table to a person.
    values
        What stands in it.
    faults
        Shared by all the tables of a file.
    """

    def __init__(self, place: str, values: Mapping[str, object], faults: list[str]) -> None:
        self.place = place
        self._values = values
        self._faults = faults
        self._unsound: set[str] = set()

    def note(self, key: str, fault: str) -> None:
        """Note what is wrong with a key."""
        self._unsound.add(key)
        place = f"{self.place}.{_plain_key(key)}" if self.place else _plain_key(key)
        self._faults.append(f"{place}: {fault}")

    @property
    def unsound(self) -> Set[str]:
        """The keys with which something is wrong, be they there or not."""
        return self._unsound

    def has(self, key: str) -> bool:
        """Whether the key is there, whatever its value."""
        return key in self._values

    def has_any(self, *quantities: Quantity) -> bool:
        """Whether any of the quantities is given, in whatever unit."""
        return any(self.key_of(quantity) for quantity in quantities)

    def key_of(self, quantity: Quantity) -> str | None:
        """Return the key under which a quantity is given, or ``None``."""
        return next((key for key in quantity.keys if key in self._values), None)

    def quantity(self, quantity: Quantity) -> float | None:
        """Return a quantity in the program's unit."""
        given = [key for key in quantity.keys if key in self._values]
        for key in given[1:]:
            self.note(key, f"given beside {given[0]}; keep one of them")
        return self._measure(quantity, given[0], self._values[given[0]]) if given else None

    def lengths(self, quantity: Quantity) -> tuple[tuple[str, float], ...]:
        """Return the patterns and lengths of a table whose name says the unit, such as ``obstacles_m``."""
        tables = [(key, table) for key in quantity.keys if (table := self.table(key)) is not None]
        return tuple(
            (pattern, length)
            for key, table in tables
            for pattern, value in table._values.items()
            if table._is_pattern(pattern)
            and (length := table._measure(quantity, key, value, pattern)) is not None
        )

    def whole_number(self, key: str) -> int | None:
        """Return a whole number above 0."""
        value = self._values.get(key)
        if value is None:
            return None
        if isinstance(value, int) and not isinstance(value, bool) and 0 < value <= MOST:
            return value
        self._refuse(key, f"a whole number from 1 to {MOST}")
        return None

    def text(self, key: str, example: str) -> str | None:
        """Return a text in one printable line."""
        value = self._values.get(key)
        if value is None:
            return None
        text = plain_text(value) if isinstance(value, str) else ""
        if not text:
            self._refuse(key, f"a text such as {shown(example)}")
        return text or None

    def word(self, key: str, words: Sequence[Word]) -> Word | None:
        """Return one of some words."""
        value = self._values.get(key)
        if value is None:
            return None
        found = _one_of(value, words)
        if found is None:
            self._refuse(key, f"one of {_listed(words)}")
        return found

    def words(self, key: str, words: Sequence[Word]) -> tuple[Word, ...]:
        """Return a list of some words, each of them at most once; empty when it is missing or wrong."""
        value = self._values.get(key)
        if value is None:
            return ()
        expected = f"a list of one or more of {_listed(words)}"
        if not isinstance(value, list) or not value:
            self._refuse(key, expected)
            return ()
        found = [_one_of(each, words) for each in value]
        for each in [each for each, word in zip(value, found, strict=True) if word is None]:
            self.note(key, f"got {shown(each)} in it, expected {expected}")
        if len({*found} - {None}) < len([word for word in found if word]):
            self.note(key, "names a word twice; once is enough")
        return tuple(word for word in found if word is not None)

    def table(self, key: str) -> "Table | None":
        """Return a table in the table."""
        value = self._values.get(key)
        if value is None:
            return None
        if isinstance(value, dict):
            return Table(f"{self.place}.{_plain_key(key)}", value, self._faults)
        heading = re.sub(r"\[\d+\]", "", f"{self.place}.{key}")
        self._refuse(key, f"a table of its own, [{heading}]")
        return None

    def require(self, key: str, example: object) -> None:
        """Note that a key is missing, if it is."""
        if key not in self._values:
            self.note(key, f"missing; expected for example {key} = {shown(example)}")

    def refuse_unknown(self, known: Sequence[str]) -> None:
        """Note every key that is not known, with the nearest that is, or else where to look."""
        for key in self._values:
            if key not in known:
                self.note(key, f"unknown key; {_nearest(key, known)}")

    def _is_pattern(self, pattern: str) -> bool:
        if not plain_text(pattern):
            self.note(pattern, "an empty pattern fits nothing; name what to stay away from")
        return bool(plain_text(pattern))

    def _measure(self, quantity: Quantity, key: str, value: object, place: str = "") -> float | None:
        number, expected = _finite(value), quantity.expected_in(key)
        if number is not None and quantity.allows(number):
            if abs(number) <= MOST and (abs(number) >= LEAST or quantity.allows(0.0)):
                return number * quantity.units[key.removeprefix(quantity.name)]
            expected = f"a size between {LEAST:g} and {MOST:g}"
        self.note(place or key, f"got {shown(value)}, expected {expected}")
        return None

    def _refuse(self, key: str, expected: str) -> None:
        self.note(key, f"got {shown(self._values[key])}, expected {expected}")


def shown(value: object) -> str:
    """Return a value of a TOML file as a person would recognise it, short and printable."""
    if isinstance(value, bool):
        return str(value).lower()
    if isinstance(value, str):
        return f'"{plain_text(value, LONGEST)}"'
    if isinstance(value, list):
        return plain_text(f"[{', '.join(shown(each) for each in value)}]", LONGEST)
    if isinstance(value, dict):
        return "a table"
    return plain_text(_digits(value), LONGEST)


def _digits(value: object) -> str:
    try:
        return str(value)
    except ValueError:  # a whole number of thousands of digits, which Python declines to spell out
        return "a huge number"


def _finite(value: object) -> float | None:
    """The value as a float if it is a number that has one."""
    if isinstance(value, bool) or not isinstance(value, int | float):
        return None
    try:
        return float(value) if isfinite(value) else None
    except OverflowError:
        return None


def _one_of(value: object, words: Iterable[Word]) -> Word | None:
    """The word that the value is, capitals aside."""
    return next((word for word in words if isinstance(value, str) and value.strip().casefold() == word), None)


def _listed(words: Iterable[str]) -> str:
    return ", ".join(f'"{word}"' for word in words)


def _plain_key(key: str) -> str:
    bare = key and all(sign.isascii() and (sign.isalnum() or sign in "_-") for sign in key)
    return key if bare and len(key) <= LONGEST else shown(key)


def _nearest(key: str, known: Sequence[str]) -> str:
    """What may have been meant: the same name with a unit, a name spelt much the same, or else any."""
    plain = key[:LONGEST].strip().casefold()
    with_unit = [each for each in known if each.startswith(f"{plain}_")]
    near = with_unit or get_close_matches(plain, known, n=1)
    usual = [each for each in known if (base := each.rpartition("_")[0] + "_m") not in known or each == base]
    return f"did you mean {near[0]}?" if near else f"the keys are {', '.join(usual)}"
