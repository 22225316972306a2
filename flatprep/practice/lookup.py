"""The tables asked at the bench: one question, one answer with its source."""

import re
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path

from flatprep.base.errors import UsageError
from flatprep.base.names import did_you_mean
from flatprep.practice import lookup_sizes, lookup_threads
from flatprep.practice.question import Question, Value, Values
from flatprep.profile.hardware.names import UnknownHardwareError, tidy
from flatprep.profile.hardware.tolerance import cut_range, general_mm, thermal_cut_mm
from flatprep.profile.material import Material

_GENERAL = re.compile(
    r"iso\s*2768(?:-1)?[\s-]*([fmcv])[HKL]?\s+(\d+(?:\.\d+)?)\s*(?:mm)?(?:\s+(radius|chamfer))?", re.I
)
_THERMAL = re.compile(
    r"(?:din\s*)?(?:en\s*)?iso\s*9013(?:[\s-]+class)?[\s-]+([12])\s+(\d+(?:\.\d+)?)\s*(?:mm)?", re.IGNORECASE
)
_RANGE = re.compile(r"(?:en\s*)?iso\s*9013[\s-]+(u|rz5?)[\s-]*(?:range\s*)?(\d)", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class LookupAnswer:
    """The answer to a question at the bench.

    Attributes
    ----------
    kind, name : str
        As asked.
    title : str
        The name in the form the trade writes it, with what was taken for granted: ``M8 ISO 4032`` for ``M8``.
    values : mapping of str to float, str or None
        Units stand in the names; None where the table has no figure.
    source : str
    """

    kind: str
    name: str
    values: Mapping[str, Value]
    source: str
    title: str = ""


def lookup(  # noqa: PLR0913 the options of the command, one for one
    kind: str,
    name: str = "",
    *,
    thickness_mm: float | None = None,
    radius_mm: float | None = None,
    angle_deg: float | None = None,
    material: Material | None = None,
    own: Sequence[Path] = (),
) -> LookupAnswer:
    """Look one thing up.

    Parameters
    ----------
    kind
        One of `KINDS`.
    name
        ``M6``, ``22 N7``, ``608``, ``M5 ISO 10642``, ...; may be empty for ``bend``.
    thickness_mm, radius_mm, angle_deg, material
        Where the kind needs them: a bend, a gauge, a thermal cut; a thread says what it holds in a plate.
    own
        Folders of own tables, looked into first.

    Raises
    ------
    UsageError
        For an unknown kind or name, with the nearest known ones, or where something that it needs is not given.
    """
    kind = _kind(kind)
    question = Question(name.strip(), thickness_mm, radius_mm, angle_deg, material, tuple(own))
    if not question.name and kind != "bend":
        raise UsageError(
            f"{kind}: which one?", f'write a name behind it, such as flatprep lookup {kind} "{_EXAMPLES[kind]}"'
        )
    title, values, source = KINDS[kind](question)
    return LookupAnswer(kind, question.name or title, values, source, title)


def _kind(text: str) -> str:
    word = "-".join(text.strip().casefold().replace("_", " ").replace("-", " ").split())
    for form in (word, word.removesuffix("s"), word.removesuffix("es")):
        if form in KINDS:
            return form
    raise UsageError(f'"{text}" is no table', did_you_mean(text, KINDS))


def _tolerance(q: Question) -> Values:
    text = " ".join(tidy(q.name).split())
    for pattern, answer in ((_GENERAL, _general), (_THERMAL, _thermal), (_RANGE, _thermal_range)):
        match = pattern.fullmatch(text)
        if match:
            return answer(q, match)
    raise UnknownHardwareError(
        f'tolerance "{q.name}" is not known', 'write "iso2768 m 35", "iso9013 1 20" or "iso9013 u 2", the size in mm'
    )


def _general(q: Question, match: re.Match[str]) -> Values:
    zone, size = match[1].lower(), float(match[2])
    found = general_mm(zone, size, "radius" if match[3] else "linear", q.own)
    return f"ISO 2768-{zone} {size:g}", {"plus_minus_mm": found}, q.table_source("tolerance_iso2768")


def _thermal(q: Question, match: re.Match[str]) -> Values:
    grade, size = int(match[1]), float(match[2])
    found = thermal_cut_mm(grade, size, q.need_thickness("tolerance"), q.own)
    return f"ISO 9013 class {grade} {size:g}", {"plus_minus_mm": found}, q.table_source("tolerance_iso9013", ("range",))


def _thermal_range(q: Question, match: re.Match[str]) -> Values:
    kind, number = ("u", "u_mm") if match[1].lower() == "u" else ("rz5", "rz5_um")
    found = cut_range(kind, int(match[2]), q.need_thickness("tolerance"), q.own)
    source = q.table_source("tolerance_iso9013", ("range",))
    return f"ISO 9013 {kind} range {match[2]}", {number: found}, source


KINDS: Mapping[str, Callable[[Question], Values]] = {
    "thread": lookup_threads.thread,
    "clearance": lookup_threads.clearance,
    "fit": lookup_sizes.fit,
    "bearing": lookup_sizes.bearing,
    "bush": lookup_sizes.bush,
    "nut": lookup_threads.nut,
    "countersink": lookup_threads.countersink,
    "counterbore": lookup_threads.counterbore,
    "shoulder-screw": lookup_threads.shoulder_screw,
    "pin": lookup_sizes.pin,
    "drill": lookup_sizes.drill,
    "bend": lookup_sizes.bend_answer,
    "bend-radius": lookup_sizes.bend_radius,
    "gauge": lookup_sizes.gauge,
    "tolerance": _tolerance,
}
"""What may be looked up; a new table is one function and one line here."""

_EXAMPLES = {
    "thread": "M6", "clearance": "M6", "fit": "22 N7", "bearing": "608", "bush": "10", "nut": "M8",
    "countersink": "M5 ISO 10642", "counterbore": "M6", "shoulder-screw": "1/4", "pin": "6", "drill": "#7",
    "bend-radius": "6061-T6", "gauge": "16", "tolerance": "iso2768 m 35",
}  # fmt: skip
