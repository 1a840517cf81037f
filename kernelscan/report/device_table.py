"""What was understood of a device file, as two tables: what each device sees, and where it may go."""

from collections.abc import Callable, Sequence
from dataclasses import replace
from math import degrees, inf
from typing import TextIO

from kernelscan.coverage.limits import device_limits
from kernelscan.plain_text import plain_text
from kernelscan.plan import Device
from kernelscan.report.terminal import cell, print_parts, table_of
from kernelscan.units import feet_and_inches

__all__ = ["DEVICE_NOTE", "print_devices"]

DEVICE_NOTE = (
    "Floor edges are on the axis, densities on a target that faces the lens. They follow from the figures in the "
    "file, not from a test, and claim no compliance with any standard."
)
"""What the figures must be read with."""

SEEING = (
    "device",
    "kind",
    "field",
    "height",
    "tilt",
    "blind below",
    "floor to",
    "range",
    "set by",
    "wanted",
    "got there",
)
FIXING = (
    "device",
    "fixed to",
    "lens stands off",
    "off walls",
    "off openings",
    "off obstacles",
    "least grazing",
    "may be off by",
    "cost",
)
NONE = "–"
BOUNDLESS = 10_000.0
"""Metres; an edge beyond is none on a site."""

Shown = Callable[[float], str]


def print_devices(file: str, devices: Sequence[Device], out: TextIO, feet: bool = False) -> None:
    """Print the devices of a file, lengths in metres or in feet and inches."""
    length, exact = (_feet, _feet) if feet else (_metres, _to_the_millimetre)
    counted = f"{len(devices)} device" + ("" if len(devices) == 1 else "s")
    seeing, fixing = table_of(*SEEING), table_of(*FIXING)
    for device in devices:
        seeing.add_row(cell(device.name), cell(device.kind), *_seeing(device, length, feet))
        fixing.add_row(cell(device.name), *_fixing(device, exact))
    print_parts(
        out,
        f"{plain_text(file)}: {counted}. What each sees:",
        seeing,
        "Where each goes:",
        fixing,
        DEVICE_NOTE,
    )


def _seeing(device: Device, length: Shown, feet: bool) -> list[str]:
    # The range that the device itself has; what the placing error takes from it depends on the place.
    limits = device_limits(replace(device, placing_error=0.0))
    near, far = device.floor_seen if device.vertical_field and device.height else (None, None)
    return [
        _field(device),
        _or_none(device.height, length),
        _or_none(device.tilt if device.vertical_field or device.tilt else None, _angle),
        _or_none(near, length),
        _or_none(far, length),
        f"{length(device.nearest)} to {length(limits.reach)}",
        limits.reach_limit,
        _or_none(device.density, lambda density: _density(density, feet)),
        _or_none(device.density_at(limits.reach), lambda density: _density(density, feet)),
    ]


def _fixing(device: Device, length: Shown) -> list[str]:
    clearances = device.clearances
    return [
        ", ".join(device.fixings),
        length(device.stand_off),
        length(clearances.walls),
        length(clearances.openings),
        plain_text(", ".join(f"{pattern} {length(off)}" for pattern, off in clearances.obstacles), 120)
        or NONE,
        _angle(device.grazing),
        length(device.placing_error),
        _or_none(device.cost, lambda cost: f"{cost:,.2f}"),
    ]


def _or_none(value: float | None, shown: Shown) -> str:
    return NONE if value is None else shown(value)


def _field(device: Device) -> str:
    if device.vertical_field is None:
        return _angle(device.horizontal_field)
    return f"{_angle(device.horizontal_field).removesuffix(' deg')} x {_angle(device.vertical_field)}"


def _angle(radians: float) -> str:
    return f"{round(degrees(radians), 1):g} deg"


def _metres(metres: float) -> str:
    return _beyond(metres) or f"{metres:.2f} m"


def _to_the_millimetre(metres: float) -> str:
    return f"{metres:.3f} m"


def _feet(metres: float) -> str:
    return _beyond(metres) or feet_and_inches(metres)


def _beyond(metres: float) -> str:
    if metres == inf:
        return "unbounded"
    return f"over {BOUNDLESS / 1000:g} km" if metres > BOUNDLESS else ""


def _density(density: float, feet: bool) -> str:
    if density == 0:
        return NONE
    return f"{density * 0.3048:.1f} px/ft" if feet else f"{density:.1f} px/m"
