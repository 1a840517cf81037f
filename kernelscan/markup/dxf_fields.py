"""What the points of the DXF mark-up carry as attributes: all that a fitter needs, in words."""

from collections.abc import Iterator, Mapping
from math import degrees

from kernelscan.coverage.device_spots import DeviceAnswer
from kernelscan.coverage.device_words import aim_in_words, set_out_in_words, shortfall_in_words
from kernelscan.coverage.wording import Custom, angle_in_words
from kernelscan.markup.room_schedule import tried_in_words
from kernelscan.markup.shown import ShownRoom, ShownSpot, device_tag
from kernelscan.markup.style import MARKS, TRIED_LETTER

__all__ = ["device_points", "plain_points", "tried_fields"]

Values = Mapping[str, str]


def plain_points(shown: ShownRoom, custom: Custom) -> Iterator[tuple[ShownSpot, Values]]:
    """Yield the recommended points without devices and their attributes."""
    for spot, best in zip(shown.spots, shown.basis.recommended, strict=True):
        yield spot, {
            "TAG": spot.tag,
            "ROOM": shown.room.id,
            "NAME": shown.room.name,
            "FIELD": angle_in_words(best.field_of_view),
            "RANGE": custom.range_up(best.farthest),
            "TOLERANCE": custom.tolerance_down(best.tolerance),
        }  # fmt: skip


def device_points(shown: ShownRoom, custom: Custom) -> Iterator[tuple[ShownSpot, Values]]:
    """Yield a point for each device that covers the room and its attributes, or the best partial one."""
    for spot in shown.spots:
        for index in spot.devices:
            yield (
                spot,
                {
                    "ROOM": shown.room.id,
                    "NAME": shown.room.name,
                    **_of_device(shown.answer.devices[index], spot, custom),
                    "TAG": device_tag(index),
                },
            )


def _of_device(answer: DeviceAnswer, shown: ShownSpot, custom: Custom) -> dict[str, str]:
    device = answer.device
    told = {
        "DEVICE": device.name,
        "KIND": device.kind,
        "FIXING": MARKS[shown.fixing].word,
        "FIELD": angle_in_words(device.horizontal_field),
        "TILT": f"{degrees(device.tilt):.0f}°",
        "HEIGHT": "" if device.height is None else custom.length(device.height),
    }
    if not answer.spots:
        aims = [f"{degrees(aim) % 360:.0f}°" for aim in shown.aims]
        return {**told, "AIM": ", ".join(aims) or "all round", "REMARK": shortfall_in_words(answer)}
    spot = answer.spots[0]
    return {
        **told,
        "AIM": aim_in_words(spot),
        "RANGE": custom.range_up(spot.farthest),
        "DENSITY": "" if spot.density is None else f"{int(spot.density + 1e-9)}",
        "TOLERANCE": custom.tolerance_down(spot.tolerance),
        "SETOUT": set_out_in_words(answer.room, spot.setting_out, custom),
    }


def tried_fields(shown: ShownRoom, custom: Custom) -> Values:
    """Return the attributes of the best point tried in a room where none sees every wall."""
    remark = "" if shown.tried is None else tried_in_words(shown.tried, custom)
    return {"TAG": TRIED_LETTER, "ROOM": shown.room.id, "NAME": shown.room.name, "REMARK": remark}
