"""Why no point sees a room whole, and what small features were left out, in lines for a person."""

from collections.abc import Iterator
from math import ceil

from kernelscan.coverage import RoomAnswer
from kernelscan.coverage.features import Feature
from kernelscan.coverage.hidden import Hidden
from kernelscan.coverage.reasons import TELLING_SHORTFALL
from kernelscan.coverage.wording import Custom
from kernelscan.plan import Plan
from kernelscan.report.wording import drawn_position

__all__ = ["feature_lines", "reason_lines"]

PATCHES = 3
"""How many hidden patches are told one by one."""

SLACK = 1e-6
"""In the last place: what is whole but for its rounding is not pushed over."""


def reason_lines(plan: Plan, answer: RoomAnswer) -> Iterator[str]:
    """Yield why no point of a room sees every wall, what would help, and the best point tried."""
    reasons = answer.reasons
    if reasons is None:
        return
    yield from reasons.because
    if 0 < reasons.shortfall <= TELLING_SHORTFALL:
        short = Custom(plan.unit.imperial).length_up(reasons.shortfall)
        yield f"It falls short by {short}: so far would every wall have to give way."
    used = 0.0 if answer.tolerant is None else answer.tolerant.simplified.depth
    if reasons.least is not None and reasons.least.depth > used:
        advice = ceil(reasons.least.depth * 1000 - SLACK) / 1000
        yield f"With --ignore-depth {advice:.3f} the outline would have points that see all the rest of it."
    yield (
        f"The {reasons.best.words} is {drawn_position(plan, reasons.best.point.tolist())}; "
        f"{_hidden(plan, reasons.hidden)}."
    )


def feature_lines(plan: Plan, answer: RoomAnswer) -> Iterator[str]:
    """Yield the small features that were left out, and what they hide from each recommended spot."""
    tolerant = answer.tolerant
    if tolerant is None or not tolerant.simplified.features:
        return
    for feature in tolerant.simplified.features:
        yield f"Left out: {_feature(plan, feature)}."
    for spot, hidden in zip(tolerant.zones.recommended, tolerant.hidden, strict=True):
        place = f"From the {spot.mount} spot {drawn_position(plan, spot.point.tolist())}"
        if hidden is None:
            yield f"{place}: it lies on a feature that was left out; choose another."
        else:
            yield f"{place}: {_hidden(plan, hidden)}."


def _feature(plan: Plan, feature: Feature) -> str:
    custom = Custom(plan.unit.imperial)
    where = drawn_position(plan, feature.middle.tolist())
    return f"a {feature.kind} {custom.length(feature.width)} wide and {custom.length(feature.depth)} deep at {where}"


def _hidden(plan: Plan, hidden: Hidden) -> str:
    """What is not seen: floor, wall, and where the largest patches are."""
    custom = Custom(plan.unit.imperial)
    if not hidden.patches and not hidden.stretches:
        return "nothing is hidden"
    where = ", ".join(drawn_position(plan, patch.middle) for patch in hidden.patches[:PATCHES])
    patches = f", most of it at {where}" if where else ""
    return (
        f"it does not see {custom.area(hidden.floor_hidden)} {custom.area_unit} of the floor{patches}, "
        f"and {custom.length(hidden.wall_hidden)} of the walls"
    )
