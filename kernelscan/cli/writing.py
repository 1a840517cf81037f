"""Writing results: every file whole or not at all, and a folder's files together."""

import os
import re
import tempfile
from collections.abc import Iterable, Mapping
from pathlib import Path

from kernelscan.errors import InputError

__all__ = ["write_file", "write_folder"]


def write_file(path: Path, content: bytes, inputs: Iterable[Path] = ()) -> None:
    """Write one file whole or not at all; ``InputError`` when it cannot be written or is one that was read."""
    write_folder(path.parent, {path.name: content}, inputs=inputs)


def write_folder(
    folder: Path,
    contents: Mapping[str, bytes],
    outdated: re.Pattern[str] | None = None,
    inputs: Iterable[Path] = (),
) -> list[str]:
    """Write several files into a folder, and return the names of the outdated ones removed.

    All are written beside their places before the first is moved there, so that a full disk or a fault leaves the
    folder as it was; each move is whole.

    Parameters
    ----------
    folder
        Made when it is not there.
    contents
        File names, without folders, and what goes into each.
    outdated
        Files of this pattern that are not among ``contents`` are from an earlier run: a sheet of another drawing
        must not lie beside a new one.
    inputs
        Files that were read: none of them is written over.

    Raises
    ------
    InputError
        When the folder or a file in it cannot be written; nothing is changed then.
    """
    try:
        folder.mkdir(parents=True, exist_ok=True)
        _spare(folder, contents, inputs)
        blocked = [name for name in contents if (folder / name).is_dir()]
        if blocked:
            raise IsADirectoryError(f"{folder / blocked[0]} is a folder")
        with tempfile.TemporaryDirectory(prefix=".kernelscan-", dir=folder) as waiting:
            for name, content in contents.items():
                Path(waiting, name).write_bytes(content)
            for name in contents:
                os.replace(Path(waiting, name), folder / name)  # noqa: PTH105 - replaces on every system
        return _remove_outdated(folder, contents, outdated)
    except OSError as error:
        reason = error.strerror or str(error)
        raise InputError(f"{folder}: cannot write there ({reason}); choose another place") from error


def _spare(folder: Path, contents: Mapping[str, bytes], inputs: Iterable[Path]) -> None:
    """Refuse to write over a file that was read."""
    places = {(folder / name).resolve() for name in contents}
    for path in inputs:
        if path.resolve() in places:
            raise InputError(f"{path.name}: would be written over by the results; choose another place")


def _remove_outdated(
    folder: Path, contents: Mapping[str, bytes], outdated: re.Pattern[str] | None
) -> list[str]:
    if outdated is None:
        return []
    names = sorted(
        path.name
        for path in folder.iterdir()
        if outdated.fullmatch(path.name) and path.name not in contents and path.is_file()
    )
    for name in names:
        (folder / name).unlink()
    return names
