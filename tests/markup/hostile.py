"""Text that a drawing may carry and that must do no harm."""

from dataclasses import replace

from markup.cases import classics, plan_of

from kernelscan.coverage import RoomAnswer
from kernelscan.plan import Plan, Problem

HOSTILE = {
    "markup": "<script>alert(1)</script>",
    "attribute": "\"' onload='alert(1)",
    "section": "]]></text><!-- &lt; &#x3c;",
    "formula": "=cmd|' /C calc'!A0",
    "path": "../../x",
    "long": "x" * 10_000,
    "long words": "wide " * 2_000,
    "override": "\u202egnp.exe\u202c\u2066x\u2069\u200f",
    "emoji": "\U0001f6bd\U0001f468\u200d\U0001f469\u200d\U0001f467 lavatory",
    "nul": "a\x00b\x07c\x1bd\x7f\x85\u2028e",
    "surrogate": "a\ud800b\uffffc",
    "cad codes": "\\A1;{\\fArial|b0;\\C1;x}\\P^J^M%%u%%133%<\\AcVar>%",
    "empty": "",
    "spaces": " \t\r\n ",
    "east asian": "会議室" * 30,
    "right to left": "غرفة الاجتماعات",
}


def hostile_answers(name: str) -> list[RoomAnswer]:
    text = HOSTILE[name]
    rooms = [replace(each.room, name=text) for each in classics()]
    return [
        replace(each, zones=replace(each.zones, room=room))
        for each, room in zip(classics(), rooms, strict=True)
    ]


def hostile_plan(name: str) -> Plan:
    text = HOSTILE[name]
    plan = plan_of(hostile_answers(name), file=text)
    return replace(plan, room_rule=text, problems=(Problem(text, text),))
