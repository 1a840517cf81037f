"""The drawing's unit: what the option says, else what the header says, else an error that helps to choose.

A header is wrong more often than not in drawings that people exchange, so its word is checked: when it makes the
median room smaller than a cupboard or larger than a stadium, the drawing is refused until a person says the unit.
"""

from collections.abc import Sequence
from statistics import median

from ezdxf.document import Drawing

from kernelscan.errors import InputError
from kernelscan.plan.plan import UnitSource
from kernelscan.reading.interpretation import Interpretation
from kernelscan.reading.unit_proposal import PROPOSED, UnitProposal, proposed_unit
from kernelscan.units import HEADER_UNITS, OPTION_UNITS, Unit, unit_by_name

__all__ = ["absurd_unit", "drawing_unit", "no_unit"]

SMALLEST_MEDIAN, LARGEST_MEDIAN = 0.5, 5000.0


def drawing_unit(drawing: Drawing, option: str | None) -> tuple[Unit, UnitSource] | None:
    """Return the unit and who said so; ``None`` when nobody does, or when it is to be found out.

    Raises
    ------
    InputError
        If the option names no unit.
    """
    if option == "auto":
        return None
    if option is not None:
        if option not in OPTION_UNITS:
            raise InputError(f"--unit: got {option!r}, expected auto or one of {', '.join(OPTION_UNITS)}")
        return unit_by_name(option), "option"
    code = drawing.header.get("$INSUNITS", 0)
    unit = HEADER_UNITS.get(code) if isinstance(code, int) else None
    return (unit, "header") if unit else None


def no_unit(file: str, code: object, reading: Interpretation, proposal: UnitProposal | None) -> InputError:
    """Return the error for a drawing without a unit: what its rooms would measure under each likely one."""
    valid = isinstance(code, int) and code in HEADER_UNITS
    said = "says no unit" if code in (0, None) or valid else f"says unit {code!r}, which does not exist"
    lead = (
        f"{file}: no unit can be found out from the drawing"
        if valid
        else f"{file}: the header ($INSUNITS) {said}"
    )
    seems = (
        f"; it seems to be {proposal.unit.name} ({proposal.reason}): --unit auto accepts that"
        if proposal
        else ""
    )
    return InputError(f"{lead}; {_choices(reading)}; give --unit{seems}")


def absurd_unit(file: str, areas: Sequence[float], unit: Unit, reading: Interpretation) -> InputError | None:
    """Return the error if the header's unit makes the rooms absurd, or leaves none where another one gives some.

    A median room under 0.5 m2 or over 5,000 m2 is absurd. Where the drawing closes no room under any likely unit, the
    unit is not to blame.
    """
    if areas and SMALLEST_MEDIAN <= median(areas) <= LARGEST_MEDIAN:
        return None
    proposal = proposed_unit(reading)
    if not areas and (proposal is None or proposal.unit == unit or not reading.areas(proposal.unit.metres)):
        return None
    makes = f"makes the median room {_square_metres(median(areas))}" if areas else "leaves no room at all"
    seems = (
        f"; it seems to be {proposal.unit.name} ({proposal.reason}): --unit auto accepts that"
        if proposal
        else ""
    )
    return InputError(
        f"{file}: the unit of the header ($INSUNITS), {unit.name}, {makes}; {_choices(reading)}; give --unit{seems}"
    )


def _choices(reading: Interpretation) -> str:
    """Say what the median room would measure under each likely unit, and under which of them there is none."""
    areas = {name: reading.areas(unit_by_name(name).metres) for name in PROPOSED}
    sizes = [f"{_square_metres(median(areas[name]))} in {name}" for name in PROPOSED if areas[name]]
    none = [name for name in PROPOSED if not areas[name]]
    parts = ["the median room would measure " + ", ".join(sizes)] if sizes else []
    parts += [f"there would be no room in {', '.join(none)}"] if none else []
    return "; ".join(parts)


def _square_metres(area: float) -> str:
    return f"{area:,.2f} m2" if 0.01 <= area < 1e6 else f"{area:.1e} m2"
