"""Open a drawing file: whatever it turns out to be, the outcome is a drawing or one line that says what to do.

The plain reader goes first; what it refuses is given to the recovering reader, whose repairs become problems.
A "recovery" that holds nothing is an error, because a note saved under the name of a drawing recovers into a
valid and empty one.
"""

import os
from pathlib import Path

from ezdxf import recover
from ezdxf.document import Drawing
from ezdxf.entities.dxfentity import DXFEntity
from ezdxf.filemanagement import readfile

from kernelscan.errors import InputError
from kernelscan.plan import Problem, Source
from kernelscan.reading.texts import clean_text

__all__ = ["open_drawing"]

BINARY_SENTINEL = b"AutoCAD Binary DXF\r\n\x1a\x00"
DWG_RELEASES = {
    b"AC1012": "R13",
    b"AC1014": "R14",
    b"AC1015": "2000",
    b"AC1018": "2004",
    b"AC1021": "2007",
    b"AC1024": "2010",
    b"AC1027": "2013",
    b"AC1032": "2018",
}
OTHER_FILES = {
    b"%PDF": "a PDF",
    b"PK\x03\x04": "a zip archive",
    b"\x1f\x8b": "a gzip archive",
    b"<?xml": "XML",
    b"<svg": "an SVG",
    b"\x89PNG": "a PNG picture",
    b"\xff\xd8\xff": "a JPEG picture",
    b"ISO-10303": "an IFC or STEP file",
}
REPAIRS_LISTED = 20
HEADER_BYTES = 2**20


def open_drawing(path: Path) -> tuple[Drawing, list[Problem]]:
    """Return the drawing in a file and what had to be repaired in it.

    Parameters
    ----------
    path
        A DXF file, text or binary, release 12 to 2018.

    Raises
    ------
    InputError
        If there is no such file, it cannot be read, is empty, is something else (a DWG, a PDF, plain text …)
        or is damaged beyond recovery.
    """
    head = _first_bytes(path)
    _refuse_other_files(path, head)
    try:
        drawing = readfile(path)
    except Exception as fault:  # the library's faults on damaged bytes are of any kind
        if head.startswith(BINARY_SENTINEL):
            raise InputError(
                f"{path.name}: a damaged binary DXF ({_reason(fault)}); save it again, as text DXF"
            ) from fault
        drawing, problems = _recovered(path)
    else:
        problems = []
    if not _states_a_unit(path):
        # The library makes up a unit for a drawing that has no header.
        drawing.header["$INSUNITS"] = 0
    return drawing, problems


def _states_a_unit(path: Path) -> bool:
    """Whether the beginning of the file, where a header stands, speaks of a unit at all."""
    with path.open("rb") as file:
        return b"$INSUNITS" in file.read(HEADER_BYTES)


def _first_bytes(path: Path) -> bytes:
    try:
        with path.open("rb") as file:
            head = file.read(4096)
    except IsADirectoryError as fault:
        raise InputError(f"{path.name}: is a folder; give the DXF file in it") from fault
    except FileNotFoundError as fault:
        raise InputError(f"{path.name}: no such file in {path.parent}; check the path") from fault
    except (OSError, ValueError) as fault:
        if os.path.isdir(path):  # noqa: PTH112 - asks without raising; some systems refuse to open a folder
            raise InputError(f"{path.name}: is a folder; give the DXF file in it") from fault
        raise InputError(f"{path.name}: cannot be read ({_reason(fault)}); check its permissions") from fault
    if not head:
        raise InputError(f"{path.name}: the file is empty; save the drawing again as DXF")
    return head


def _refuse_other_files(path: Path, head: bytes) -> None:
    if head[:4] == b"AC10" and head[:6].isalnum():
        release = DWG_RELEASES.get(head[:6], "unknown release")
        raise InputError(
            f"{path.name}: is a DWG drawing ({release}), not a DXF; open it in the program that made it "
            "(with its password, if it has one) and save it as DXF"
        )
    for magic, kind in OTHER_FILES.items():
        if head.startswith(magic):
            raise InputError(f"{path.name}: is {kind}, not a drawing; export the plan as DXF")
    if not head.startswith(BINARY_SENTINEL) and head.count(0) > len(head) // 10:
        raise InputError(
            f"{path.name}: is neither a DXF nor a known format (damaged or encrypted); save the plan again as DXF"
        )


def _recovered(path: Path) -> tuple[Drawing, list[Problem]]:
    try:
        drawing, auditor = recover.readfile(path)
    except Exception as fault:
        raise InputError(
            f"{path.name}: is not a DXF or is damaged beyond recovery ({_reason(fault)}); save the plan again as DXF"
        ) from fault
    if not any(len(layout) for layout in drawing.layouts):
        raise InputError(f"{path.name}: no drawing could be recovered from it; save the plan again as DXF")
    found = [*auditor.errors, *auditor.fixes]
    problems = [
        Problem("damaged-drawing", f"recovered: {clean_text(entry.message)}", None, _source(entry.entity))
        for entry in found[:REPAIRS_LISTED]
    ]
    if len(found) > REPAIRS_LISTED or not found:
        rest = len(found) - len(problems)
        text = (
            f"and {rest} more repairs"
            if rest
            else "the file was damaged and has been recovered; check the result"
        )
        problems.append(Problem("damaged-drawing", text))
    return drawing, problems


def _source(entity: DXFEntity | None) -> Source:
    if entity is None or not entity.is_alive:
        return Source()
    layer = entity.dxf.layer if entity.dxf.is_supported("layer") else ""
    return Source(clean_text(str(layer)), str(entity.dxf.handle or ""))


def _reason(fault: Exception) -> str:
    text = getattr(fault, "strerror", None) or str(fault) or type(fault).__name__
    return clean_text(" ".join(text.split()))[:120]
