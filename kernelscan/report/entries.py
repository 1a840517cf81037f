"""The entries of the report, as ``report.schema.json`` describes them."""

from typing import NotRequired, TypedDict

from kernelscan.report.device_entries import DeviceEntry

__all__ = [
    "FeatureEntry",
    "HiddenEntry",
    "HiddenStretchEntry",
    "KernelEntry",
    "OpeningEntry",
    "PatchEntry",
    "PlanEntry",
    "Position",
    "ProblemEntry",
    "Report",
    "RoomEntry",
    "SpotEntry",
    "StretchEntry",
    "TolerantEntry",
    "Wall",
    "WhyNotEntry",
    "ZonesEntry",
]

Position = list[float]
Wall = list[int]


class PlanEntry(TypedDict):
    """The drawing, its unit, and the rule by which rooms were found."""

    file: str
    unit: str
    unit_from: str
    room_rule: str


class KernelEntry(TypedDict):
    """The visibility kernel of one room."""

    kind: str
    vertices: list[Position]
    area: float
    walls: list[Wall]
    conflict: list[Wall]


class SpotEntry(TypedDict):
    """A point where a device may be fixed, and what the device must be able to do there."""

    mount: str
    point: Position
    field_of_view_deg: float
    bearing_deg: float | None
    farthest: float
    tolerance: float
    walls: list[Wall]


class StretchEntry(TypedDict):
    """A stretch of wall from which every wall is seen; piece i of its path lies on wall i."""

    walls: list[Wall]
    path: list[Position]
    length: float


class ZonesEntry(TypedDict):
    """Where one device sees every wall, by mount."""

    ceiling: list[Position]
    walls: list[StretchEntry]
    corners: list[SpotEntry]


class PatchEntry(TypedDict):
    """A patch of floor that is not seen: a point well inside it, and its area."""

    at: Position
    area: float


class HiddenStretchEntry(TypedDict):
    """A stretch of wall that is not seen."""

    wall: Wall
    ends: list[Position]


class HiddenEntry(TypedDict):
    """What a point does not see of the exact room."""

    floor: float
    wall: float
    patches: list[PatchEntry]
    stretches: list[HiddenStretchEntry]


class WhyNotEntry(TypedDict):
    """Why no point sees every wall, and the best of the points tried."""

    because: list[str]
    shortfall: float
    blame: str
    ignore_depth: float | None
    best_tried: Position
    tried: int
    hidden: HiddenEntry


class FeatureEntry(TypedDict):
    """A small feature that was left out."""

    kind: str
    depth: float
    width: float
    middle: Position
    walls: list[Wall]


class TolerantEntry(TypedDict):
    """The answer without small features."""

    ignore_depth: float
    outline: list[Position]
    features: list[FeatureEntry]
    kernel: KernelEntry
    zones: ZonesEntry
    recommended: list[SpotEntry]
    hidden: list[HiddenEntry | None]
    devices: NotRequired[list[DeviceEntry]]


class OpeningEntry(TypedDict):
    """A door, a window or a gap, and where along its wall it lies, from 0 to 1."""

    wall: Wall
    kind: str
    width: float
    span: list[float]


class RoomEntry(TypedDict):
    """One room, with its answers when the command computed them."""

    id: str
    name: str
    name_from: str
    layer: str
    handle: str
    closed_by: str
    outline: list[Position]
    holes: list[list[Position]]
    area: float
    openings: list[OpeningEntry]
    kernel: NotRequired[KernelEntry]
    zones: NotRequired[ZonesEntry]
    recommended: NotRequired[list[SpotEntry]]
    why_not: NotRequired[WhyNotEntry]
    tolerant: NotRequired[TolerantEntry]
    devices: NotRequired[list[DeviceEntry]]


class ProblemEntry(TypedDict):
    """Something that was met while reading."""

    code: str
    message: str
    at: Position | None
    layer: str
    handle: str


class Report(TypedDict):
    """The whole document."""

    format: str
    version: int
    plan: PlanEntry
    rooms: list[RoomEntry]
    problems: list[ProblemEntry]
    cautions: list[str]
