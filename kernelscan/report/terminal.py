"""How tables and lines come to a terminal, or to a file or a pipe in its place."""

from typing import TextIO

from rich.console import Console
from rich.table import Table
from rich.text import Text

from kernelscan.plain_text import plain_text

__all__ = ["cell", "print_parts", "table_of"]

PIPE_WIDTH = 160
"""Columns when the output is not a terminal, so that a redirected table is not folded to 80."""


def table_of(*columns: str) -> Table:
    """Return an empty table with those columns."""
    table = Table(box=None, pad_edge=False, header_style="bold")
    for column in columns:
        table.add_column(column, overflow="fold")
    return table


def cell(text: str) -> Text:
    """Return text from a drawing or a device file as it may stand in a table."""
    return Text(plain_text(text, 40))


class _Console(Console):
    """A console that leaves it to the caller what to do when the reader of the output has gone."""

    def on_broken_pipe(self) -> None:
        raise BrokenPipeError


def print_parts(out: TextIO, *parts: str | Table) -> None:
    """Print lines and tables, one below the other."""
    console = _Console(file=out, highlight=False, width=None if out.isatty() else PIPE_WIDTH)
    for part in parts:
        console.print(Text(part) if isinstance(part, str) else part, soft_wrap=isinstance(part, str))
