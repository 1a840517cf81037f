"""``kernelscan devices``: what was understood of a device file."""

import sys
from pathlib import Path
from typing import Annotated

import typer

from kernelscan.cli.options import Quiet

__all__ = ["devices"]


def devices(
    device_file: Annotated[
        Path, typer.Argument(metavar="FILE.toml", help="The device file, see docs/devices.md.")
    ],
    feet: Annotated[bool, typer.Option("--feet", help="Print lengths in feet and inches.")] = False,
    quiet: Quiet = False,
) -> None:
    """Check a device file, and print what was understood: fields, ranges, blind areas, clearances."""
    from kernelscan.reading import read_devices
    from kernelscan.report.device_table import print_devices

    found = read_devices(device_file)
    if not quiet:
        print_devices(device_file.name, found, sys.stdout, feet)
