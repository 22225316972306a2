"""The holes that a drawing's callouts stand for: by their leaders, else by what is nearest and can be meant."""

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from math import cos, radians, sin

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.job.values import Work
from flatprep.measure.holes import Hole, HoleShape
from flatprep.model.drawing import Text
from flatprep.practice.callout_text import plain_callout
from flatprep.practice.callouts import Callout, parse_callouts
from flatprep.practice.targets import SAME_DIA_MM
from flatprep.profile.hardware.clearance import find_clearance
from flatprep.profile.hardware.fits import parse_fit
from flatprep.profile.hardware.heads import all_countersinks, find_counterbore, find_countersink
from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.profile.hardware.threads import find_thread

REACH_HEIGHTS = 4.0
"""A text without a leader speaks of a hole whose rim is no farther than so many heights of its letters."""
LEAST_REACH_MM = 10.0
LETTER_WIDTH = 0.75
"""Width of a letter over its height, about."""
LEADER_SLACK_MM = 1.0
_THREAD_LIKE = re.compile(r"(?:\(?\d{1,3}\s*x\)?\s*)?(?P<thread>M\s?\d+(?:\.\d+)?(?:\s*x\s*\d*\.?\d+)?)(?:\s*-?\s*6H)?")


@dataclass(frozen=True, slots=True)
class DrawnWork:
    """What the callouts of a drawing ask for, and what has to be asked back."""

    work: tuple[Work, ...]
    questions: tuple[str, ...]


class _RoundHoles:
    """Round holes with their centres, shape (n, 2), and radii, shape (n,), mm."""

    def __init__(self, holes: Sequence[Hole]) -> None:
        self.holes = [hole for hole in holes if hole.shape is HoleShape.CIRCLE]
        self.centre = np.array([hole.at for hole in self.holes]).reshape(-1, 2)
        self.radius = np.array([hole.width_mm / 2.0 for hole in self.holes])


def drawn_work(holes: Sequence[Hole], texts: Iterable[Text], unit: str = "mm") -> DrawnWork:
    """Return the bench work that callouts ask for; what is not certain becomes a question, not work.

    Parameters
    ----------
    holes
        Of one part.
    texts
        Of its drawing.
    unit
        The drawing's unit, which bare numbers in the texts are in.
    """
    work: list[Work] = []
    questions: list[str] = []
    round_holes = _RoundHoles(holes)
    for text in texts:
        callouts = parse_callouts(text.text, unit)
        questions += [] if callouts else _unknown_thread(text, round_holes)
        for callout in callouts:
            try:
                made, question = _work(callout, text, round_holes)
            except UnknownHardwareError as err:
                made, question = [], [f"{_said(text)}: {err.message}: what is meant?"]
            work += made
            questions += question
    return DrawnWork(tuple(_joined(work)), tuple(dict.fromkeys(questions)))


def _work(callout: Callout, text: Text, holes: _RoundHoles) -> tuple[list[Work], list[str]]:
    said = _said(text)
    named = _pointed_at(text, holes)
    near = named or _nearest(text, holes, callout)
    if near is None:
        return [], []
    if not _can_be_meant(callout, near.width_mm):
        return [], [f"{said} at a hole of {near.width_mm:.4g} mm: is that hole meant?"]
    unnamed = _heads_to_choose(callout)
    if unnamed:
        return [], [f"{said}: which head? {unnamed}"]
    alike = [h for h in holes.holes if abs(h.width_mm - near.width_mm) <= SAME_DIA_MM]
    if callout.count is None:
        meant = [near]
    elif callout.count == len(alike):
        meant = alike
    else:
        return [], [f"{said}: holes of {near.width_mm:.4g} mm drawn: {len(alike)}, asked for: {callout.count}"]
    one = Work(
        callout.kind, callout.size, at=tuple(h.at for h in meant), side=callout.side, where=said,
        depth_mm=callout.depth_mm if callout.kind != "counterbore" else None, note="as the drawing's callout asks",
    )  # fmt: skip
    return [one], []


def _unknown_thread(text: Text, holes: _RoundHoles) -> list[str]:
    """Ask back where a text beside a hole is written like a thread that no table has: ``M9``, ``4x M5x12``."""
    match = _THREAD_LIKE.fullmatch(plain_callout(text.text))
    if match is None or not (_pointed_at(text, holes) or _in_reach(text, holes)):
        return []
    try:
        find_thread(match["thread"])
    except UnknownHardwareError as err:
        return [f"{_said(text)}: {err.message} ({err.remedy}): what is meant?"]
    return []


def _said(text: Text) -> str:
    return f'the drawing says "{" ".join(text.text.split())}"'


def _pointed_at(text: Text, holes: _RoundHoles) -> Hole | None:
    """Return the hole that a leader of the text points to: its tip on the rim or inside."""
    found: list[tuple[float, int]] = []
    for tip in text.points_to:
        apart = np.hypot(*(holes.centre - tip).T)
        inside = np.nonzero(apart <= holes.radius + LEADER_SLACK_MM)[0]
        found += [(float(apart[k]), int(k)) for k in inside]
    return holes.holes[min(found)[1]] if found else None


def _nearest(text: Text, holes: _RoundHoles, callout: Callout) -> Hole | None:
    """Return the nearest hole in reach that can be meant, else the nearest in reach."""
    if text.points_to:
        return None
    near = _in_reach(text, holes)
    return next((hole for hole in near if _can_be_meant(callout, hole.width_mm)), near[0] if near else None)


def _in_reach(text: Text, holes: _RoundHoles) -> list[Hole]:
    """Return the holes whose rims a text stands beside, nearest first."""
    if not holes.holes:
        return []
    reach = max(LEAST_REACH_MM, REACH_HEIGHTS * text.height_mm)
    rim = np.maximum(_to_text_mm(text, holes.centre) - holes.radius, 0.0)
    return [holes.holes[k] for k in np.argsort(rim, kind="stable")[: int(np.count_nonzero(rim <= reach))]]


def _to_text_mm(text: Text, points: Floats) -> Floats:
    """Return the distances of points, shape (n, 2), from the box of a text that runs from its insertion point, mm."""
    turn = radians(text.turn_deg)
    dx, dy = (points - text.at).T
    along, up = dx * cos(turn) + dy * sin(turn), dy * cos(turn) - dx * sin(turn)
    long = max(len(line) for line in text.text.splitlines()) * LETTER_WIDTH * text.height_mm
    beside = np.maximum(np.maximum(-along, along - long), 0.0)
    above = np.maximum(np.maximum(-up, up - text.height_mm), 0.0)
    apart: Floats = np.hypot(beside, above)
    return apart


def _can_be_meant(callout: Callout, drawn_mm: float) -> bool:
    """Tell whether a hole of that diameter may be drawn for what the callout asks: a pilot, or the size itself."""
    low, high = _sizes(callout)
    return low - SAME_DIA_MM <= drawn_mm <= high + SAME_DIA_MM


def _sizes(callout: Callout) -> tuple[float, float]:
    if callout.kind == "tap":
        thread = find_thread(callout.size)
        return 0.4 * thread.major_mm, thread.major_mm
    if callout.kind in ("ream", "bore"):
        size = parse_fit(callout.size).first
        return 0.5 * size.nominal_mm, size.most_mm
    if callout.kind == "drill" and callout.diameter_mm is not None:
        return callout.diameter_mm * 0.9, callout.diameter_mm + 0.1
    if " x " in callout.size:
        return 0.2, float(callout.size.split(" x ")[0])
    return 0.2, _through_mm(callout)


def _through_mm(callout: Callout) -> float:
    """Return the largest hole under the head of a screw, mm."""
    return find_clearance(callout.size.split()[0]).coarse_mm


def _heads_to_choose(callout: Callout) -> str:
    """Return the heads that a countersink callout may mean, with their sinks; empty where it is clear."""
    if callout.kind == "counterbore" and " x " not in callout.size:
        find_counterbore(callout.size)  # raises for a screw that has none
    if callout.kind != "countersink" or " x " in callout.size:
        return ""
    try:
        find_countersink(callout.size)
    except UnknownHardwareError:
        screw = callout.size.split()[0]
        heads = [c for c in all_countersinks() if c.screw == screw]
        return ", ".join(f"{c.standard} (sink {c.sink_dia_mm:.4g} mm)" for c in heads) or "none is known for that screw"
    return ""


def _joined(work: list[Work]) -> list[Work]:
    """Join work of the same kind and size that several texts ask for, hole by hole."""
    out: dict[tuple[object, ...], Work] = {}
    for one in work:
        key = (one.kind, one.size, one.side, one.depth_mm)
        if key in out:
            places = tuple(dict.fromkeys((*out[key].at, *one.at)))
            out[key] = Work(
                one.kind, one.size, at=places, side=one.side, where=out[key].where, depth_mm=one.depth_mm, note=one.note
            )
        else:
            out[key] = one
    return list(out.values())
