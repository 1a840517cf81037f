"""Which part a layer plays: by the patterns that a user gives, else by the words of its name.

The names follow the published conventions (discipline, major and minor group: A-WALL, A-AREA-IDEN, S-COLS of the
US National CAD Standard) and the words of several languages, compared whole, without case and accents, and without
the prefix of a bound external reference. The word lists are common practice, put together from what the words mean;
they have no single source.
"""

from collections.abc import Iterable
from dataclasses import dataclass
from fnmatch import fnmatchcase
from typing import Literal

from kernelscan.reading.texts import words

__all__ = ["LayerPatterns", "LayerRole", "Role", "layer_role", "matches"]

Role = Literal[
    "room", "wall", "opening", "obstacle", "device", "furniture", "stairs", "annotation", "other", "unknown"
]


@dataclass(frozen=True, slots=True)
class LayerPatterns:
    """Which layers a user says are what: shell-style patterns, case-blind; none means by convention.

    Patterns for a role take the place of the conventions for that role; the other roles keep theirs.

    Attributes
    ----------
    rooms
        Layers whose closed outlines are rooms.
    walls, openings
        Layers whose lines are walls, or doors and windows.
    obstacles
        Layers whose closed outlines block sight inside a room.
    devices
        Layers on which devices are placed.
    ignored
        Layers that play no part.
    """

    rooms: tuple[str, ...] = ()
    walls: tuple[str, ...] = ()
    openings: tuple[str, ...] = ()
    obstacles: tuple[str, ...] = ()
    devices: tuple[str, ...] = ()
    ignored: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class LayerRole:
    """The part that one layer plays, and why."""

    layer: str
    role: Role
    reason: str


ROOM_WORDS = """
    room rooms area areas space spaces raum raume raeume zimmer piece pieces local locals locaux locale locali
    vano vani stanza stanze ambiente ambienti habitacion habitaciones sala salas recinto recintos estancia estancias
    cuarto cuartos ruimte ruimtes ruimten vertrek vertrekken huone huoneet rum pokoj pokoje pomieszczenie
    pomieszczenia mistnost mistnosti oda odalar comodo comodos divisao divisoes
"""
WALL_WORDS = """
    wall walls wand wande waende aussenwand innenwand aussenwande innenwande mauer mauern mauerwerk mur murs
    cloison cloisons muro muri parete pareti tramezzo tramezzi pared paredes muros tabique tabiques parede muur muren
    sciana sciany stena steny stena vagg vaggar vegg vegger vaeg seina seinat duvar duvarlar partition partitions
    partn prtn
"""
OPENING_WORDS = """
    door doors window windows opening openings glaz glazing glass doorway doorways gate tur turen tuer tueren fenster
    offnung offnungen oeffnung oeffnungen porte portes fenetre fenetres ouverture ouvertures baie baies porta finestra
    finestre infissi serramenti apertura aperture puerta puertas ventana ventanas vano janela janelas portas deur
    deuren raam ramen kozijn kozijnen drzwi okno okna dvere dorr dorrar fonster dor dorer vindu ovi ovet ikkuna kapi
    pencere
"""
OBSTACLE_WORDS = """
    column columns cols pillar pillars pier piers stutze stutzen stuetze stuetzen saule saulen saeule saeulen pfeiler
    poteau poteaux pilier piliers colonne pilastro pilastri colonna pilar pilares columna columnas kolom kolommen
    slup slupy sloup sloupy pelare kolonn kolonner pilari kolon obstacle obstacles hindernis hindernisse ostacolo
    ostacoli obstaculo obstaculos
"""
FURNITURE_WORDS = """
    furn furniture mobel moebel mobiliar mobilier meuble meubles arredo arredi mobili mobiliario muebles mueble
    mobilia meubilair mobler fixture fixtures fixt equip equipment eqpm eqpt sanitar sanitary sanitaer sanitaires
    sanitari appliance appliances casework cabinet cabinets chair chairs desk desks cpu sofa bed beds person
    people plumbing plmb toilet bathtub sink
"""
STAIR_WORDS = (
    "stair stairs strs treppe treppen escalier escaliers scala scale escalera escaleras trap trappen schody"
)
ANNOTATION_WORDS = """
    anno annotation dim dims dimension dimensions text texts note notes legend title titleblock tblk border sheet
    iden symb symbol symbols label labels tag tags name names key north axis axes achse achsen raster grid bemassung
    masse beschriftung legende cote cotes cotation quota quote quotatura cotas texto textos testo testi patt pattern
    hatch hatching schraffur schraffuren hachure hachures tratteggio sombreado defpoints viewport viewports vport
    nplt revision rev cloud redline scalebar anntext plankopf schriftfeld maatvoering tekst arcering rahmen
"""
OTHER_WORDS = """
    foot footing footings footer ftng foundation fundament slab beam beams header headers roof roofs dach ceiling
    ceilings clng decke rcp site prop property elev elevation elevations sect section sections schnitt coupe sezione
    seccion detl detail details hvac duct ducts mech elec electrical light lights lighting power pipe pipes
    tile tiles topo landscape planting plants plant tree trees car cars parking rail rails railing railings stem
    projection journeys temp tmp below above over ovhd construction hilfslinien demo demolition abbruch
"""
WEAK_WORDS = """
    floor flooring flor finish finishes boden sol pavimento deck concept footprint case edge frame frames
"""

ORDER: tuple[tuple[Role, str], ...] = (
    ("annotation", ANNOTATION_WORDS),
    ("furniture", FURNITURE_WORDS),
    ("stairs", STAIR_WORDS),
    ("other", OTHER_WORDS),
    ("obstacle", OBSTACLE_WORDS),
    ("room", ROOM_WORDS),
    ("opening", OPENING_WORDS),
    ("wall", WALL_WORDS),
    ("other", WEAK_WORDS),
)
"""A name may hold words of several roles; the first in this order counts: A-WALL-PATT is a pattern, not a wall."""

RANK_OF_WORD: dict[str, int] = {
    word: rank for rank, (_, text) in reversed(list(enumerate(ORDER))) for word in text.split()
}
ROOM_RANK = [role for role, _ in ORDER].index("room")


def layer_role(layer: str, patterns: LayerPatterns) -> LayerRole:
    """Return the part that a layer plays.

    The patterns count before the conventions, and among them rooms before walls, openings, obstacles, devices and
    ignored.
    """
    given: tuple[tuple[Role, tuple[str, ...]], ...] = (
        ("room", patterns.rooms),
        ("wall", patterns.walls),
        ("opening", patterns.openings),
        ("obstacle", patterns.obstacles),
        ("device", patterns.devices),
        ("other", patterns.ignored),
    )
    for role, wanted in given:
        hit = matches(layer, wanted)
        if hit:
            return LayerRole(layer, role, f"matches {hit!r}")
    by_words = _by_words(layer)
    if any(role == by_words.role and wanted for role, wanted in given[:-1]):
        return LayerRole(
            layer, "other", f"{by_words.reason}, but other layers are named as {by_words.role} layers"
        )
    return by_words


def _by_words(layer: str) -> LayerRole:
    ranks = {word: RANK_OF_WORD[word] for word in words(layer) if word in RANK_OF_WORD}
    if "iden" in ranks and ROOM_RANK in ranks.values():
        del ranks["iden"]  # A-AREA-IDEN holds the outlines of the areas as well as their names
    if not ranks:
        return LayerRole(layer, "unknown", "its name says nothing")
    word = min(ranks, key=lambda word: ranks[word])
    return LayerRole(layer, ORDER[ranks[word]][0], f"the word {word!r}")


def matches(name: str, patterns: Iterable[str]) -> str:
    """Return the first of the shell-style patterns that the name matches, case-blind; empty for none."""
    folded = name.casefold()
    return next((pattern for pattern in patterns if fnmatchcase(folded, pattern.casefold())), "")
