"""A schedule: a table measured before it is drawn, that goes on over as many sheets as it needs."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from kernelscan.markup.metrics import text_width
from kernelscan.markup.scene import Anchor, Box, Item, Stroke, Text
from kernelscan.markup.style import BODY, HEADING, RULE_PEN, TABLE_PEN
from kernelscan.markup.text import LINE_PITCH, wrapped

__all__ = ["Column", "Entry", "Form", "Head", "Row", "Schedule", "measured"]

PITCH = BODY * LINE_PITCH
GAP = 2.0
"""Between two columns, in millimetres."""

Head = tuple[str, str, Anchor]
"""The head of a column, the unit under it, and how its cells stand."""


@dataclass(frozen=True, slots=True)
class Row:
    """One line: cells by column, fewer than there are columns where the rest is empty, and a remark beside them."""

    cells: tuple[str, ...] = ()
    remark: str = ""


@dataclass(frozen=True, slots=True)
class Entry:
    """The lines of one room: its name, which may take several, and the rows beside it."""

    name: tuple[str, ...]
    rows: tuple[Row, ...]

    @property
    def height(self) -> float:
        """Height in millimetres."""
        return max(len(self.name), len(self.rows)) * PITCH + 0.8


@dataclass(frozen=True, slots=True)
class Column:
    """One column: its head, the unit under it, its edges from the table's own left edge, and how cells stand."""

    head: str
    unit: str
    left: float
    right: float
    anchor: Anchor

    def text(self, left: float, baseline: float, string: str, bold: bool = False) -> Text:
        """Return a cell drawn in a table whose left edge is there."""
        x = left + (self.left if self.anchor == "start" else self.right)
        return Text((x, baseline), string, anchor=self.anchor, bold=bold)


@dataclass(frozen=True, slots=True)
class Form:
    """What a table is before anything is in it.

    Attributes
    ----------
    title, notes
        What stands over it.
    heads
        Of its columns.
    name, name_width
        The column of names, the only one that gives way and wraps, and its width in millimetres.
    remark
        The column where remarks begin.
    least
        The width, in millimetres, to which the columns are spaced out if they are narrower together.
    """

    title: str
    notes: str
    heads: tuple[Head, ...]
    name: int
    name_width: float
    remark: int
    least: float = 0.0


@dataclass(frozen=True, slots=True)
class Schedule:
    """The whole table, measured: its columns, its width, its entries, and the lines that explain the heads."""

    form: Form
    columns: tuple[Column, ...]
    width: float
    entries: tuple[Entry, ...]
    notes: tuple[str, ...]

    @property
    def head_height(self) -> float:
        """Height of title, notes and heads in millimetres."""
        return HEADING * LINE_PITCH + 1.0 + (len(self.notes) + 2) * PITCH + 1.0

    def height(self, entries: Sequence[Entry]) -> float:
        """Return how high a table of these entries is, with its title and notes."""
        return self.head_height + sum(entry.height for entry in entries) + 0.5

    def fitting(self, first: int, height: float) -> int:
        """Return how many entries from the first on fit a height."""
        left, count = height - self.head_height - 0.5 + 1e-6, 0
        for entry in self.entries[first:]:
            left -= entry.height
            if left < 0:
                break
            count += 1
        return count

    def fits(self, space: Box) -> bool:
        """Whether a space holds the whole table."""
        return self.fitting(0, space.height) == len(self.entries)

    def items(self, left: float, top: float, entries: Sequence[Entry]) -> Iterator[Item]:
        """Yield the table of these entries with its upper left corner at a point."""
        y = top - HEADING - 1.5
        yield Text((left + 1, y), self.form.title, HEADING, bold=True)
        for note in self.notes:
            y -= PITCH
            yield Text((left + 1, y), note)
        y -= 1.5
        yield Stroke(
            Box(left, top - self.height(entries), left + self.width, y).corners, RULE_PEN, closed=True
        )
        for column in self.columns:
            yield column.text(left, y - 3.4, column.head, bold=True)
            if column.unit:
                yield column.text(left, y - 3.4 - PITCH, column.unit)
        y = top - self.head_height
        for entry in entries:
            yield Stroke(((left, y), (left + self.width, y)), TABLE_PEN)
            yield from self._entry(entry, left, y)
            y -= entry.height

    def _entry(self, entry: Entry, left: float, top: float) -> Iterator[Item]:
        first = top - 3.5
        for i, row in enumerate(entry.rows):
            for j, cell in enumerate(row.cells):
                if cell:
                    yield self.columns[j].text(left, first - i * PITCH, cell, bold=j == 0)
            if row.remark:
                yield self.columns[self.form.remark].text(left, first - i * PITCH, row.remark)
        for i, line in enumerate(entry.name):
            if line:
                yield self.columns[self.form.name].text(left, first - i * PITCH, line)


def measured(form: Form, entries: Sequence[Entry]) -> Schedule:
    """Return a table, measured: each column as wide as its widest cell, remarks wrapped to what is left of a line."""
    widths = _widths(form, entries)
    gap = max(GAP, (form.least - sum(widths) - 2.0) / (len(widths) - 1))
    columns, x = [], 1.0
    for (head, unit, anchor), wide in zip(form.heads, widths, strict=True):
        columns.append(Column(head, unit, x, x + wide, anchor))
        x += wide + gap
    width = x - gap + 1.0
    space = width - columns[form.remark].left - 1.0
    told = tuple(Entry(entry.name, tuple(_wrapped(entry.rows, space))) for entry in entries)
    return Schedule(form, tuple(columns), width, told, wrapped(form.notes, width - 2.0, BODY))


def _widths(form: Form, entries: Sequence[Entry]) -> list[float]:
    cells = [row.cells for entry in entries for row in entry.rows]
    widths = []
    for i, (head, unit, _) in enumerate(form.heads):
        strings = {unit, *(row[i] for row in cells if i < len(row))}
        widths.append(
            max(text_width(head, BODY, True), *(text_width(each, BODY, i == 0) for each in strings))
        )
    widths[form.name] = form.name_width
    return widths


def _wrapped(rows: Sequence[Row], width: float) -> Iterator[Row]:
    for row in rows:
        first, *rest = wrapped(row.remark, width, BODY) or ("",)
        yield Row(row.cells, first)
        yield from (Row((), line) for line in rest)
