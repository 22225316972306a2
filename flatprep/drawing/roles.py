"""What the lines of a layer are for: said by the user, else guessed from the layer's name or linetype, and stated."""

import re
from collections.abc import Mapping
from dataclasses import dataclass

from flatprep.model.drawing import Role

# fmt: off
_WORDS: tuple[tuple[Role, tuple[str, ...]], ...] = (
    # English, German, French, Spanish, Italian, Portuguese, Dutch; common practice, no standard names them
    (
        Role.BEND,
        ("bend", "bends", "bending", "bendline", "bendlines", "fold", "folds", "folding", "score", "crease", "biege", "biegung",
         "biegelinie", "biegelinien", "kantlinie", "pli", "plis", "pliage", "pliegue", "pliegues", "plegado",
         "doblez", "dobleces", "piega", "pieghe", "dobra", "dobras", "zetlijn"),
    ),
    (
        Role.MARK,
        ("engrave", "engraved", "engraving", "engravings", "etch", "etched", "etching", "mark", "marks", "marking", "scribe",
         "scribing", "gravur", "gravieren", "gravure", "graver", "grabado", "incisione", "gravacao", "graveren",
         "pocket", "pockets", "poc", "tasche", "poche", "cajeado", "fillet", "chamfer", "countersink", "csk"),
    ),
    (
        Role.IGNORE,
        ("dim", "dims", "dimension", "dimensions", "annotation", "annotations", "note", "notes", "title", "titleblock",
         "center", "centers", "centre", "centres", "centerline", "centerlines", "centreline", "centrelines",
         "mittellinie", "mittellinien", "bemassung", "cotes", "cotas", "hidden", "construction", "helper", "helpers",
         "hilfslinien", "hilfslinie", "defpoints", "hatch", "viewport", "viewports", "phantom", "nocut"),
    ),
    (
        Role.CUT,
        ("cut", "cuts", "cutting", "outline", "outlines", "contour", "contours", "perimeter", "outer", "inner", "profile",
         "schnitt", "schneiden", "kontur", "aussenkontur", "innenkontur", "decoupe", "coupe", "corte", "taglio", "snijden"),
    ),
)
# fmt: on
_ROLE_OF_WORD = {word: role for role, words in _WORDS for word in words}
_PRECEDENCE = (Role.BEND, Role.MARK, Role.IGNORE, Role.CUT)
_LINETYPES = (
    # ISO 128-2: long-dashed dotted lines are centre lines, dashed ones hidden edges
    (re.compile(r"CENT(ER|RE)|DASHDOT|CHAIN|MITTE|ACAD_ISO(04|08|10)W"), Role.IGNORE, "centre line by its linetype"),
    (re.compile(r"PHANTOM|DIVIDE|ACAD_ISO(05|09|12)W"), Role.BEND, "bend or phantom line by its linetype (ISO 128)"),
    (
        re.compile(r"HIDDEN|DASHED|VERDECKT|ACAD_ISO0[23]W"),
        Role.MARK,
        "dashed, a hidden edge by its linetype (ISO 128)",
    ),
)


@dataclass(frozen=True, slots=True)
class Guess:
    """A role and why."""

    role: Role
    why: str


def role_of(layer: str, linetype: str, said: Mapping[str, Role], *, off: bool) -> Guess:
    """Say what the lines of a layer and linetype are for.

    Parameters
    ----------
    layer, linetype
        As in the file.
    said
        Layer name -> role, from the user; names compare without case.
    off
        The layer is switched off or frozen.
    """
    for name, role in said.items():
        if name.lower() == layer.lower():
            return Guess(role, "as said")
    if off and _ROLE_OF_WORD.get(layer.lower()) is Role.CUT:
        return Guess(Role.CUT, f"its name is “{layer}”, though it is switched off or frozen")
    if off:
        return Guess(Role.IGNORE, "its layer is switched off or frozen")
    by_name = _by_name(layer)
    if by_name is not None and by_name.role is not Role.CUT:
        return by_name
    for pattern, role, why in _LINETYPES:
        if pattern.search(linetype.upper()):
            return Guess(role, why)
    return by_name or Guess(Role.CUT, "nothing says otherwise")


def _by_name(layer: str) -> Guess | None:
    words = re.findall(r"[a-zäöüßéèàçãõñ]+", re.sub(r"([a-zäöü])([A-Z])", r"\1 \2", layer).lower())
    roles = {_ROLE_OF_WORD[w]: w for w in reversed(words) if w in _ROLE_OF_WORD}
    for role in _PRECEDENCE:
        if role in roles:
            return Guess(role, f"its layer's name says “{roles[role]}”")
    return None
