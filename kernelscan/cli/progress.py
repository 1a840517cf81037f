"""Progress on standard error, when somebody is looking."""

import sys
from collections.abc import Iterator, Sequence
from typing import TypeVar

__all__ = ["with_progress"]

Item = TypeVar("Item")
WORTH_SHOWING = 20
"""Shorter work is over before a bar can be read."""


def with_progress(items: Sequence[Item], doing: str, quiet: bool) -> Iterator[Item]:
    """Yield the items, with a bar on standard error if it is a terminal and there is much to do."""
    if quiet or len(items) < WORTH_SHOWING or not sys.stderr.isatty():
        yield from items
        return
    from rich.console import Console
    from rich.progress import track

    yield from track(items, description=doing, console=Console(stderr=True), transient=True)
