"""A device file into devices: TOML, one ``[[device]]`` table each, with every fault of the file told at once.

First each value is read on its own, then the rules between values are checked, as far as the values that they speak of
are sound. The keys are listed in ``device_keys``.
"""

import tomllib
from collections.abc import Mapping, Sequence
from math import inf, pi
from pathlib import Path

from kernelscan.errors import InputError
from kernelscan.plain_text import plain_text
from kernelscan.plan import Clearances, Device
from kernelscan.reading.device_keys import (
    CLEAR_OF_OBSTACLES,
    CLEAR_OF_OPENINGS,
    CLEAR_OF_WALLS,
    CLEARANCE_KEYS,
    COST,
    DEVICE_KEYS,
    FARTHEST,
    FIXINGS,
    GRAZING,
    HEIGHT,
    NEAREST,
    PLACING_ERROR,
    PROJECTIONS,
    QUANTITIES,
    STAND_OFF,
    TARGET_HEIGHT,
    TILT,
)
from kernelscan.reading.device_rules import (
    check_given_together,
    check_picture,
    check_reach,
    density_wanted,
    horizontal_field,
    vertical_field,
)
from kernelscan.reading.toml_table import Table, shown

__all__ = ["read_devices"]

LARGEST_FILE = 250_000
"""Bytes; a device is some hundreds."""


def read_devices(path: Path | str) -> tuple[Device, ...]:
    """Read a device file.

    Parameters
    ----------
    path
        A TOML file in UTF-8; its keys are described in ``docs/devices.md``.

    Returns
    -------
    tuple of Device
        In the order of the file, at least one; lengths in metres, angles in radians.

    Raises
    ------
    InputError
        If there is no such file, it cannot be read or is not TOML; or else with a line for each fault in it, such as
        ``devices.toml: device[2].farthest_m: got -3, expected a length above 0 m``, devices counted from 1.
    """
    path = Path(path)
    name = plain_text(path.name)
    content = _parsed(name, _text(name, path))
    faults: list[str] = []
    tables = _tables(content, faults)
    devices = tuple(_device(table) for table in tables)
    _refuse_second_names(tables, devices)
    if faults:
        raise InputError(*(f"{name}: {fault}" for fault in faults))
    return devices


def _text(name: str, path: Path) -> str:
    if path.is_dir():
        raise InputError(f"{name}: is a folder; give the device file in it")
    try:
        with path.open("rb") as file:
            raw = file.read(LARGEST_FILE + 1)
    except FileNotFoundError as fault:
        raise InputError(f"{name}: no such file in {plain_text(str(path.parent))}; check the path") from fault
    except (OSError, ValueError) as fault:
        reason = getattr(fault, "strerror", None) or str(fault)
        raise InputError(f"{name}: cannot be read ({plain_text(reason)}); check its permissions") from fault
    if len(raw) > LARGEST_FILE:
        raise InputError(
            f"{name}: over {LARGEST_FILE:,} bytes is no device file; give the one that lists devices"
        )
    try:
        return raw.decode("utf-8-sig")
    except UnicodeDecodeError as fault:
        line = raw.count(b"\n", 0, fault.start) + 1
        raise InputError(f"{name}: line {line} is not UTF-8 text; save the file as UTF-8") from fault


def _parsed(name: str, text: str) -> dict[str, object]:
    if not text.strip():
        raise InputError(f"{name}: the file is empty; describe each device in a table [[device]]")
    try:
        return tomllib.loads(text)
    except ValueError as fault:  # and not only tomllib's own: whole numbers of thousands of digits
        raise InputError(f"{name}: is not TOML: {plain_text(str(fault))}; correct it there") from fault
    except RecursionError as fault:
        raise InputError(f"{name}: is not a device file: lists within lists without end") from fault


def _tables(content: Mapping[str, object], faults: list[str]) -> list[Table]:
    """The device tables of a file."""
    Table("", content, faults).refuse_unknown(["device"])
    entries = content.get("device")
    if entries is None and not faults:
        faults.append("no device; describe each in a table headed [[device]]")
    elif entries is not None and (not isinstance(entries, list) or not entries):
        faults.append(f"device: got {shown(entries)}, expected tables headed [[device]], one for each device")
    if not isinstance(entries, list):
        return []
    for number, entry in enumerate(entries, 1):
        if not isinstance(entry, dict):
            faults.append(f"device[{number}]: got {shown(entry)}, expected a table headed [[device]]")
    return [
        Table(f"device[{number}]", entry, faults)
        for number, entry in enumerate(entries, 1)
        if isinstance(entry, dict)
    ]


def _device(table: Table) -> Device:
    """The device of a table, its faults noted; what is missing or wrong is replaced by something of the kind."""
    table.refuse_unknown(DEVICE_KEYS)
    table.require("name", "Corner camera")
    table.require("kind", "camera")
    table.require("fixed_to", ["corner", "wall"])
    values = {quantity: table.quantity(quantity) for quantity in QUANTITIES}
    projection = table.word("projection", PROJECTIONS) or "pinhole"
    farthest = values[FARTHEST]
    device = Device(
        name=table.text("name", "Corner camera") or "",
        kind=table.text("kind", "camera") or "",
        fixings=table.words("fixed_to", FIXINGS),
        horizontal_field=horizontal_field(table, values, projection) or pi / 2,
        vertical_field=vertical_field(table, values, projection),
        tilt=values[TILT] or 0.0,
        height=values[HEIGHT],
        target_height=values[TARGET_HEIGHT],
        nearest=values[NEAREST] or 0.0,
        farthest=inf if farthest is None else farthest,
        pixels_across=table.whole_number("pixels_across"),
        density=density_wanted(table, values),
        projection=projection,
        grazing=values[GRAZING] or 0.0,
        stand_off=values[STAND_OFF] or 0.0,
        clearances=_clearances(table.table("clearance")),
        placing_error=values[PLACING_ERROR] or 0.0,
        cost=values[COST],
    )
    check_given_together(table)
    check_picture(table, device)
    check_reach(table, device)
    return device


def _clearances(table: Table | None) -> Clearances:
    if table is None:
        return Clearances()
    table.refuse_unknown(CLEARANCE_KEYS)
    return Clearances(
        walls=table.quantity(CLEAR_OF_WALLS) or 0.0,
        openings=table.quantity(CLEAR_OF_OPENINGS) or 0.0,
        obstacles=table.lengths(CLEAR_OF_OBSTACLES),
    )


def _refuse_second_names(tables: Sequence[Table], devices: Sequence[Device]) -> None:
    """Note each device whose name, capitals aside, an earlier one has."""
    first: dict[str, str] = {}
    for table, device in zip(tables, devices, strict=True):
        owner = first.setdefault(device.name.casefold(), table.place)
        if device.name and owner != table.place:
            table.note("name", f"got {shown(device.name)}, expected a name other than that of {owner}")
