"""Lint as text for people: one block a drawing, worst first, with place, measured, limit and remedy."""

from collections import Counter
from collections.abc import Iterator, Sequence
from pathlib import PurePath
from textwrap import wrap

from flatprep.model.drawing import Part
from flatprep.model.finding import Finding, Severity
from flatprep.model.linted import Linted, LintReport
from flatprep.report.figures import area, counted, length, mass, measure, place, size
from flatprep.report.words import lengths_in

ONCE_A_FOLDER = "unknown-units"
"""Told once for all drawings of a folder, for it has one cause."""
ALIKE = 4
"""So many findings of a rule and part are told one by one; more of them by their places only."""
WIDTH = 110


def lint_text(report: LintReport, units: str | None = None) -> str:
    """Return the text of a whole run; lengths in `units`, else in each drawing's own."""
    blocks = [_block(one, units or one.drawing.units) for one in report.linted]
    blocks += [_unreadable(one.message, one.remedy) for one in report.unreadable]
    tail = [
        *_units_lines(report.linted),
        *(f"note: {lengths_in(note, units or 'mm')}" for note in report.notes),
        _summary(report),
    ]
    return "\n\n".join([*blocks, "\n".join(tail)])


def _block(one: Linted, units: str) -> str:
    told = [f for f in one.findings if f.rule != ONCE_A_FOLDER]
    held = [one.material, length(one.thickness_mm, units) if one.thickness_mm else None, one.process]
    against = ", ".join(word for word in held if word)
    lines = [one.file + (f"  ({against})" if against else "")]
    lines += [f"  {_part_line(one, part, units)}" for part in one.drawing.parts]
    for group in _alike(told):
        lines += _findings(group, units, several=len(one.drawing.parts) > 1)
    if not told:
        lines.append("  nothing to find fault with")
    return "\n".join(lines)


def _part_line(one: Linted, part: Part, units: str) -> str:
    weight = one.mass_kg(part)
    figures = [
        size(*part.size_mm, units),
        area(part.area_mm2, units),
        counted(len(part.holes), "hole"),
        f"{length(part.cut_length_mm, units)} to cut",
        *([mass(weight)] if weight is not None else []),
    ]
    return f"{part.name}: {', '.join(figures)}"


def _alike(findings: Sequence[Finding]) -> list[list[Finding]]:
    """Keep findings in their order, those of one rule, part and severity together."""
    groups: dict[tuple[Severity, str, str | None], list[Finding]] = {}
    for finding in findings:
        groups.setdefault((finding.severity, finding.rule, finding.part), []).append(finding)
    return list(groups.values())


def _findings(group: list[Finding], units: str, *, several: bool) -> Iterator[str]:
    if len(group) <= ALIKE:
        for finding in group:
            yield f"  {_head(finding)}: {lengths_in(finding.message, units)}{_where(finding, units, several=several)}"
    else:
        worst = min(group, key=lambda f: f.measured if f.measured is not None else 0.0)
        message = lengths_in(worst.message, units)
        yield f"  {_head(worst)}, {len(group)} times; the worst: {message}{_where(worst, units, several=several)}"
        places = [place(f.at, units) for f in group if f.at is not None and f is not worst]
        if places:
            yield from _folded("also at " + " ".join(places))
    if group[0].remedy and group[0].severity is not Severity.NOTE:
        yield from _folded(lengths_in(group[0].remedy, units))


def _head(finding: Finding) -> str:
    return f"{str(finding.severity).upper() if finding.severity is Severity.ERROR else finding.severity} {finding.rule}"


def _where(finding: Finding, units: str, *, several: bool) -> str:
    """Say part, place and measure; where a drawing holds `several` parts, a place alone is hard to find."""
    words = []
    if finding.part is not None and (several or finding.at is None):
        words.append(f"in {_short(finding.part)}")
    if finding.at is not None:
        words.append(f"at {place(finding.at, units)}")
    if finding.measured is not None:
        limit = "" if finding.limit is None else f", limit {measure(finding.limit, finding.unit, units)}"
        words.append(f"{measure(finding.measured, finding.unit, units)}{limit}")
    return f" [{'; '.join(words)}]" if words else ""


def _short(name: str) -> str:
    """Return ``#3`` for the third part of a drawing: the drawing's own name stands over it."""
    stem, sign, number = name.rpartition("#")
    return sign + number if stem and number.isdecimal() else name


def _folded(text: str) -> Iterator[str]:
    for n, line in enumerate(wrap(text, WIDTH, break_long_words=False, break_on_hyphens=False)):
        yield f"    {'→ ' if n == 0 else '  '}{line}"


def _unreadable(message: str, remedy: str) -> str:
    return f"unreadable: {message}" + (f"\n    → {remedy}" if remedy else "")


def _units_lines(linted: Sequence[Linted]) -> Iterator[str]:
    """One line for each folder whose drawings do not say their unit."""
    folders = Counter(
        str(PurePath(one.file).parent) for one in linted if any(f.rule == ONCE_A_FOLDER for f in one.findings)
    )
    for folder, count in folders.items():
        told = next(f for one in linted for f in one.findings if f.rule == ONCE_A_FOLDER)
        where = "" if folder == "." else f" in {folder}"
        yield f"{told.severity} {ONCE_A_FOLDER}: {counted(count, 'drawing')}{where}: {told.message}"
        yield from _folded(told.remedy)


def _summary(report: LintReport) -> str:
    count = Counter(f.severity for one in report.linted for f in one.findings)
    said = [counted(count[s], str(s)) for s in Severity if count[s]] or ["nothing found"]
    lost = f", {len(report.unreadable)} unreadable" if report.unreadable else ""
    return f"{counted(len(report.linted), 'drawing')}{lost}: {', '.join(said)}"
