"""Callouts: what a drawing writes beside its holes, in ISO and ASME ways, read into bench work.

A text is a callout only if every word of it is understood as one; a material, a scale, a screw to be bought or a
date is left alone.
"""

import re
from collections.abc import Callable
from dataclasses import dataclass, field, replace
from functools import lru_cache

from flatprep.base.units import MM_PER_UNIT
from flatprep.practice.callout_text import plain_callout
from flatprep.profile.hardware.drills import find_drill
from flatprep.profile.hardware.fits import parse_fit
from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.profile.hardware.threads import find_thread

BORE_FROM_MM = 20.5
"""Fit holes from here on are bored, smaller ones reamed, unless the text says which."""

NUM = r"(?:\d+-\d+/\d+|\d+/\d+|\d*\.\d+|\d+)"


@dataclass(frozen=True, slots=True)
class Callout:
    """One thing that a text asks for.

    Attributes
    ----------
    kind : str
        ``tap``, ``ream``, ``bore``, ``drill``, ``countersink``, ``counterbore``.
    size : str
        As the tables take it: ``M5``, ``8 H7``, ``5.5``, ``M5 ISO 10642``, ``11 x 90``.
    count : int or None
        Holes meant, where the text says so.
    depth_mm : float or None
        None: right through, or not said.
    diameter_mm : float or None
        Of a plain hole.
    side : str or None
        ``A`` or ``B``.
    """

    kind: str
    size: str
    count: int | None = None
    depth_mm: float | None = None
    diameter_mm: float | None = None
    side: str | None = None


@dataclass(slots=True)
class _Reading:
    """What has been read of a text so far."""

    unit: str
    count: int | None = None
    side: str | None = None
    words: set[str] = field(default_factory=set)
    found: list[Callout] = field(default_factory=list)


class _NoCalloutError(Exception):
    """A word that no callout has."""


@lru_cache(maxsize=4096)
def parse_callouts(text: str, unit: str = "mm") -> tuple[Callout, ...]:
    """Read a text as callouts; empty where it is none.

    Parameters
    ----------
    text
        As it stands in the drawing, control codes and symbols included.
    unit
        The drawing's unit, which bare numbers are in.
    """
    flat = plain_callout(text)
    reading = _Reading(unit)
    try:
        _read(flat, reading)
    except (_NoCalloutError, UnknownHardwareError, ZeroDivisionError):
        return ()
    return _finished(reading)


def _read(flat: str, reading: _Reading) -> None:
    rest = flat
    while rest:
        for pattern, take in _GRAMMAR:
            match = pattern.match(rest)
            if match and take(match, reading):
                rest = rest[match.end() :].lstrip(" ,;:/+&-")
                break
        else:
            raise _NoCalloutError


def _finished(reading: _Reading) -> tuple[Callout, ...]:
    made = [c.kind for c in reading.found]
    out = []
    for one in reading.found:
        if one.kind == "drill" and ("tap" in made or "ream" in made or "bore" in made):
            continue  # the drill before the tap or reamer
        out.append(replace(one, count=reading.count, side=reading.side or one.side))
    return tuple(out)


# ---------------------------------------------------------------- what the parts of a callout do


def _count(match: re.Match[str], r: _Reading) -> bool:
    number = int(next(g for g in match.groups() if g))
    if r.count is not None or not 1 <= number <= 500:
        return False
    r.count = number
    return True


def _metric_thread(match: re.Match[str], r: _Reading) -> bool:
    pitch = match["pitch"]
    name = f"M{match['d']}" + (f"x{pitch}" if pitch else "")
    r.found.append(Callout("tap", find_thread(name).name))
    return True


def _inch_thread(match: re.Match[str], r: _Reading) -> bool:
    bare_number = re.fullmatch(r"\d{1,2}", match["d"]) is not None
    if bare_number and not match["series"] and not match["tap"]:
        return False  # 10-24 alone may be a date
    name = f"{match['d']}-{match['tpi']} {match['series'] or ''}".strip()
    r.found.append(Callout("tap", find_thread(name).name))
    return True


def _fit(match: re.Match[str], r: _Reading) -> bool:
    size = _mm(match["d"], match["unit1"], r.unit)
    fit = parse_fit(f"{size:g} {match['zone']}").first
    grade = fit.grade
    if not fit.is_hole or (not match["dia"] and not (6 <= grade <= 9 or grade == 11)):
        return False
    r.found.append(Callout("ream" if size < BORE_FROM_MM else "bore", fit.name))
    return True


def _plain(match: re.Match[str], r: _Reading) -> bool:
    size = _mm(match["d"], match["unit1"], r.unit)
    if not 0.2 < size < 500.0:
        return False
    r.found.append(Callout("drill", f"{size:g}", diameter_mm=size))
    return True


def _named_drill(match: re.Match[str], r: _Reading) -> bool:
    size = find_drill(match["d"])
    r.found.append(Callout("drill", match["d"], diameter_mm=size))
    return True


def _sink_for_screw(match: re.Match[str], r: _Reading) -> bool:
    standard = (match["standard"] or "").strip()
    angle = match["angle"]
    size = f"{match['screw'].replace(' ', '')} {standard}".strip()
    r.found.append(Callout("countersink", size if standard or not angle else f"{size} {angle}°"))
    return True


def _sink_to(match: re.Match[str], r: _Reading) -> bool:
    size = _mm(match["d"], match["unit1"], r.unit)
    r.found.append(Callout("countersink", f"{size:g} x {match['angle']}"))
    return True


def _bore_for_screw(match: re.Match[str], r: _Reading) -> bool:
    r.found.append(Callout("counterbore", match["screw"].replace(" ", "")))
    return True


def _bore_to(match: re.Match[str], r: _Reading) -> bool:
    dia, depth = _mm(match["d"], match["unit1"], r.unit), _mm(match["deep"], match["unit2"], r.unit)
    r.found.append(Callout("counterbore", f"{dia:g} x {depth:g}", depth_mm=depth))
    return True


def _depth(match: re.Match[str], r: _Reading) -> bool:
    if not r.found:
        return False
    r.found[-1] = replace(r.found[-1], depth_mm=_mm(match["d"], match["unit1"], r.unit))
    return True


def _side(match: re.Match[str], r: _Reading) -> bool:
    word = match[0].upper()
    r.side = {"NEAR SIDE": "A", "FAR SIDE": "B"}.get(word, word[-1])
    return True


def _word(match: re.Match[str], r: _Reading) -> bool:
    word = match[0].upper()
    r.words.add(word)
    if word == "BORE" and r.found and r.found[-1].kind == "ream":
        r.found[-1] = replace(r.found[-1], kind="bore")
    return True


def _mm(number: str, unit: str | None, drawing_unit: str) -> float:
    whole, _, part = number.rpartition("-") if "/" in number else ("", "", number)
    size = float(whole or 0) + (int(part.split("/")[0]) / int(part.split("/")[1]) if "/" in part else float(part))
    if unit == "mm":
        return size
    inch = unit == '"' or "/" in number or number.startswith(".")
    return size * MM_PER_UNIT["in" if inch else drawing_unit]


# ---------------------------------------------------------------- the grammar, tried in this order

_SIZE = rf"(?P<d>{NUM})(?:\s*(?P<unit1>mm\b|\"))?"
_DEEP = rf"(?P<deep>{NUM})(?:\s*(?P<unit2>mm\b|\"))?"
_SCREW = r"(?P<screw>M\s?\d+(?:\.\d+)?|#\d{1,2}|\d/\d+)"
_STANDARD = r"(?P<standard>\s*(?:ISO|DIN)\s*-?\s*\d{3,5}|\s*(?:ASME\s*)?B18\.\d(?:\.\d)?)?"
_ANGLE = r"(?P<angle>60|75|82|90|100|110|120)\s*°?"
_TOLERANCE = rf"(?:±\s*{NUM}|\(?\s*[+-]\s*{NUM}\s*/?\s*(?:[+-]?\s*{NUM})?\s*\)?)"


def _rule(pattern: str, take: Callable[[re.Match[str], _Reading], bool]) -> tuple[re.Pattern[str], Callable[..., bool]]:
    return re.compile(pattern + r"(?![\w.])", re.IGNORECASE), take


_GRAMMAR = (
    _rule(rf"CSK\s*(?:FOR\s*)?{_SCREW}{_STANDARD}(?:\s*(?:x|@|AT)?\s*{_ANGLE})?(?:\s*SCREWS?)?", _sink_for_screw),
    _rule(rf"{_SCREW}{_STANDARD}\s*CSK(?:\s*{_ANGLE})?", _sink_for_screw),
    _rule(rf"CSK\s*(?:TO\s*)?Ø?\s*{_SIZE}\s*(?:Ø\s*)?(?:x|@|AT|BY|/)?\s*{_ANGLE}", _sink_to),
    _rule(rf"CSK\s*{_ANGLE}\s*(?:x|@|TO)?\s*Ø?\s*{_SIZE}(?:\s*Ø)?", _sink_to),
    _rule(rf"{_ANGLE}\s*CSK\s*(?:x|@|TO)?\s*Ø?\s*{_SIZE}(?:\s*Ø)?", _sink_to),
    _rule(rf"Ø\s*{_SIZE}\s*CSK\s*(?:x|@|AT)?\s*{_ANGLE}", _sink_to),
    _rule(rf"Ø\s*{_SIZE}\s*x\s*{_ANGLE}(?<=°)", _sink_to),
    _rule(rf"CBORE\s*(?:FOR\s*)?{_SCREW}(?:\s*(?:ISO\s*4762|DIN\s*912|SHCS|SCREWS?|CAP SCREWS?))*", _bore_for_screw),
    _rule(
        rf"CBORE\s*(?:TO\s*)?Ø?\s*{_SIZE}\s*(?:Ø\s*)?(?:x|DEPTH|DEEP|BY|,)?\s*{_DEEP}"
        r"(?:\s*(?:DEEP|DEPTH))?",
        _bore_to,
    ),
    _rule(
        rf"Ø\s*{_SIZE}\s*CBORE\s*(?:x|DEPTH|DEEP)?\s*{_DEEP}(?:\s*(?:DEEP|DEPTH))?",
        _bore_to,
    ),
    (re.compile(r"\(?(\d{1,3})\s*[x*]\)?(?=\s*[(ØMCTRDB#.\d])(?!\s*\d+\s*(?:x|$))", re.IGNORECASE), _count),
    _rule(r"\((\d{1,3})\)|\(?(\d{1,3})\s*(?:x\b|OFF\b|PLACES?\b|PLS?\b\.?|PLCS\b|POSN?S?\b|HOLES?\b|NOS\b)\)?", _count),
    _rule(r"(?:IN|AT)\s+(\d{1,3})\s*(?:PLACES?|PLCS|PLS?|POSITIONS?)", _count),
    _rule(
        r"M\s?(?P<d>\d+(?:\.\d+)?)(?:\s*x\s*(?P<pitch>\d?\.\d+|\d)(?!\d))?(?:\s*-?\s*(?-i:[4-8][GH](?:[4-8][GH])?))?"
        r"(?:\s*-?\s*LH)?(?=$|[\s,;:/+&x()-]|TAP)",
        _metric_thread,
    ),
    _rule(
        r"(?P<d>#\d{1,2}|\d-\d+/\d+|\d+/\d+|\.\d+|\d{1,2})\s*\"?\s*-\s*(?P<tpi>\d{1,2})(?!\d)(?!/)"
        r"\s*-?\s*(?P<series>UNC|UNF|UN)?(?:\s*-?\s*[123]B)?(?:\s*-?\s*LH)?(?P<tap>(?:\s*x\s*\S+)?\s*-?\s*TAP)?",
        _inch_thread,
    ),
    _rule(
        rf"(?P<dia>Ø\s*)?{_SIZE}\s*\(?(?P<zone>JS\d{{1,2}}|[EFGHJKMNPR]\d{{1,2}})\)?(?:\s*{_TOLERANCE})?",
        _fit,
    ),
    _rule(rf"Ø\s*{_SIZE}(?:\s*{_TOLERANCE})?", _plain),
    _rule(rf"{_SIZE}\s*Ø(?:\s*{_TOLERANCE})?", _plain),
    _rule(r"(?:TAP\s+)?DRILL\s*(?P<d>#\d{1,2}|[A-Z])(?=\s|$)", _named_drill),
    _rule(r"(?P<d>#\d{1,2}|[A-Z])\s*DRILL", _named_drill),
    _rule(rf"(?:TAP\s+)?DRILL\s*Ø?\s*{_SIZE}", _plain),
    _rule(rf"{_SIZE}\s*(?:TAP\s+)?DRILL", _plain),
    _rule(rf"{_SIZE}(?=\s*THRU\b)", _plain),
    _rule(rf"(?:x|DEPTH|DEEP)\s*{_SIZE}(?:\s*(?:MIN|MAX|DEEP))?", _depth),
    _rule(rf"{_SIZE}\s*(?:DEEP|DEPTH)", _depth),
    _rule(rf"ON\s*(?:A\s*)?Ø?\s*{_SIZE}\s*(?:Ø\s*)?(?:P\.?C\.?D?\.?|B\.?C\.?)", _word),
    _rule(r"NEAR SIDE|FAR SIDE|SIDE\s*[AB]|FROM SIDE\s*[AB]", _side),
    _rule(r"BOTH SIDES|THRU ALL|THRU|TYP\.?|TAP|REAM|DRILL|BORE|HOLES?|REF\.?|AND|TO|MIN|FOR", _word),
    _rule(r"EQ\.?\s*SP\.?|EQUALLY SPACED|EQUISPACED", _word),
)  # fmt: skip
