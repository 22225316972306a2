"""Two revisions as text for people: what changed, part by part, and what can be done with pieces already cut."""

from collections.abc import Iterator

from flatprep.compare.values import Comparison, HoleChange, HolePair, Lines, PartChange, Region, Step, Task
from flatprep.geom.bulge import Similarity
from flatprep.measure.holes import Hole, HoleShape
from flatprep.report.figures import area, bare_length, counted, length, number, place, size

CAUTION = "clamp a piece before it is drilled or cut again: thin sheet climbs a drill; the machine's manual comes first"
_HIDDEN = 0.005
"""Steps below this are rounding and not told as a move."""


def compare_text(comparison: Comparison) -> str:
    """Return the text of a whole comparison; lengths in the new drawing's unit."""
    units = comparison.new_units
    lines = [f"{comparison.old_file} -> {comparison.new_file}"]
    if comparison.old_units != units:
        lines.append(f"  the old drawing is in {comparison.old_units}, the new one in {units}")
    for change in comparison.changes:
        lines += [f"  {line}" for line in _part(change, units)]
    for words, parts in (("a new part", comparison.appeared), ("no longer there", comparison.gone)):
        lines += [f"  {p.name}: {words}, {size(*p.size_mm, units)}, {area(p.area_mm2, units)}" for p in parts]
    lines.append(verdict(comparison))
    return "\n".join(lines)


def verdict(comparison: Comparison) -> str:
    """Return the last line: whether anything changed, and whether cut pieces can be reworked."""
    if comparison.same:
        return "no change"
    changed = [c for c in comparison.changes if not c.same]
    lost = [c for c in changed if not c.rework.possible]
    words = [counted(len(changed), "part") + " changed"] if changed else []
    words += [f"{len(comparison.appeared)} new"] if comparison.appeared else []
    words += [f"{len(comparison.gone)} gone"] if comparison.gone else []
    if changed:
        words.append(f"{len(lost)} of them scrap if already cut" if lost else "pieces already cut can be reworked")
    return ", ".join(words)


def _part(change: PartChange, units: str) -> Iterator[str]:
    name = change.old.name if change.old.name == change.new.name else f"{change.old.name} -> {change.new.name}"
    if change.same:
        where = "" if change.same_place else f", but {motion_words(change.motion, units)}"
        yield f"{name}: unchanged{where}"
        return
    yield f"{name}: {size(*change.old.size_mm, units)} -> {size(*change.new.size_mm, units)}, {_areas(change, units)}"
    if not change.same_place:
        yield f"  it lies elsewhere in its drawing: {motion_words(change.motion, units)}; places are the old drawing's"
    for pair in change.holes:
        if pair.change is not HoleChange.SAME:
            yield f"  {pair_words(pair, units)}"
    for region in change.edges:
        yield f"  {_edge(region, units)}"
    yield from _lines("bend line", change.bends)
    yield from _lines("mark", change.marks)
    yield from _rework(change, units)


def _areas(change: PartChange, units: str) -> str:
    before, after = change.old.area_mm2, change.new.area_mm2
    return f"{area(before, units)} -> {area(after, units)} ({100.0 * (after / before - 1.0):+.2f} %)"


def motion_words(motion: Similarity, units: str) -> str:
    """Return a motion in words: ``turned over, turned by 90°, moved by (12, 0) mm``."""
    words = ["turned over"] if motion.mirrored else []
    words += [f"turned by {number(motion.turn_deg, 3)}°"] if motion.turn_deg else []
    if motion.dx or motion.dy or not words:
        words.append(f"moved by {place((motion.dx, motion.dy), units)} {units}")
    return ", ".join(words)


def hole_words(hole: Hole, units: str) -> str:
    """Return a hole in words: ``hole ⌀ 5 mm``, ``slot 20 × 6 mm``."""
    if hole.diameter_mm is not None:
        return f"hole ⌀ {length(hole.diameter_mm, units)}"
    if hole.shape is HoleShape.HEXAGON:
        return f"hexagon {length(hole.width_mm, units)} across flats"
    name = {HoleShape.OBROUND: "slot", HoleShape.RECTANGLE: "rectangle"}.get(hole.shape, "window")
    return f"{name} {size(hole.length_mm, hole.width_mm, units)}"


def pair_words(pair: HolePair, units: str) -> str:
    """Return what became of a hole, with its place."""
    old, new, at = pair.old, pair.new, place(pair.at, units)
    if new is None or old is None:
        hole = new or old
        assert hole is not None
        return f"{hole_words(hole, units)} {'came' if old is None else 'went'} at {at}"
    step = _step(pair, units)
    if pair.change is HoleChange.MOVED:
        return f"{hole_words(new, units)} moved{step} to {at}"
    return f"{hole_words(old, units)} became {hole_words(new, units)}{' and moved' + step if step else ''} at {at}"


def _step(pair: HolePair, units: str) -> str:
    if pair.step is None or max(abs(v) for v in pair.step) < _HIDDEN:
        return ""
    x, y = (("+" if v > 0 else "") + bare_length(v, units).replace("-", "−") for v in pair.step)
    return f" by ({x}, {y}) {units}"


def _edge(region: Region, units: str) -> str:
    what = "out" if region.added else "in"
    depth = length(region.depth_mm, units)
    return f"outline {depth} further {what} over {length(region.length_mm, units)} at {place(region.at, units)}"


def _lines(what: str, lines: Lines) -> Iterator[str]:
    for words, curves in (("came", lines.appeared), ("went", lines.gone)):
        if curves:
            yield f"  {counted(len(curves), what)} {words}"


def _rework(change: PartChange, units: str) -> Iterator[str]:
    rework = change.rework
    if not rework.possible:
        yield "  pieces already cut are scrap: material is missing"
        for region in rework.missing[:6]:
            yield f"    {length(region.depth_mm, units)} at {place(region.at, units)}, {area(region.area_mm2, units)}"
        return
    elsewhere = rework.motion != change.motion
    yield "  pieces already cut can be reworked" + (":" if rework.steps else ", nothing is to be cut")
    if elsewhere:
        yield f"    lay the new outline {motion_words(rework.motion, units)}"
    yield from (f"    {step_words(step, units)}" for step in rework.steps)
    if rework.steps:
        yield f"    caution: {CAUTION}"


def step_words(step: Step, units: str) -> str:
    """Return a step of rework in words."""
    at = place(step.at, units)
    if step.task is Task.DRILL:
        return f"drill ⌀ {length(step.to_mm, units)} at {at}"
    if step.task is Task.OPEN_UP:
        return f"open up ⌀ {length(step.from_mm, units)} to ⌀ {length(step.to_mm, units)} at {at}"
    if step.task is Task.CUT_HOLE:
        return f"cut a window {size(step.length_mm or 0.0, step.to_mm or 0.0, units)} at {at}"
    return f"re-cut {length(step.length_mm, units)} of edge at {at}, up to {length(step.to_mm, units)} comes off"
