"""Two revisions as one JSON document, ``flatprep-compare/1``; figures unrounded, in mm."""

from flatprep.compare.values import Comparison, HolePair, PartChange, Region, Step
from flatprep.geom.bulge import Similarity
from flatprep.measure.holes import Hole
from flatprep.model.drawing import Part

SCHEMA = "flatprep-compare/1"


def compare_document(comparison: Comparison) -> dict[str, object]:
    """Return the document as plain values, ready for `json.dumps`."""
    return {
        "schema": SCHEMA,
        "old": comparison.old_file,
        "new": comparison.new_file,
        "same": comparison.same,
        "parts": [_change(change) for change in comparison.changes],
        "appeared": [_part(part) for part in comparison.appeared],
        "gone": [_part(part) for part in comparison.gone],
    }


def _change(change: PartChange) -> dict[str, object]:
    return {
        "old": _part(change.old),
        "new": _part(change.new),
        "same": change.same,
        "motion": _motion(change.motion),
        "holes": [_pair(pair) for pair in change.holes],
        "outline": [_region(region) for region in change.edges],
        "bends": {"appeared": len(change.bends.appeared), "gone": len(change.bends.gone)},
        "marks": {"appeared": len(change.marks.appeared), "gone": len(change.marks.gone)},
        "rework": {
            "possible": change.rework.possible,
            "motion": _motion(change.rework.motion),
            "missing": [_region(region) for region in change.rework.missing],
            "steps": [_step(step) for step in change.rework.steps],
        },
    }


def _part(part: Part) -> dict[str, object]:
    return {
        "name": part.name,
        "area_mm2": part.area_mm2,
        "cut_length_mm": part.cut_length_mm,
        "holes": len(part.holes),
        "size_mm": list(part.size_mm),
    }


def _motion(motion: Similarity) -> dict[str, object]:
    return {"mirrored": motion.mirrored, "turn_deg": motion.turn_deg, "dx": motion.dx, "dy": motion.dy}


def _pair(pair: HolePair) -> dict[str, object]:
    step = pair.step
    return {
        "change": str(pair.change),
        "old": None if pair.old is None else _hole(pair.old),
        "new": None if pair.new is None else _hole(pair.new),
        "moved_mm": None if step is None else list(step),
    }


def _hole(hole: Hole) -> dict[str, object]:
    return {
        "shape": str(hole.shape),
        "at": list(hole.at),
        "diameter_mm": hole.diameter_mm,
        "width_mm": hole.width_mm,
        "length_mm": hole.length_mm,
    }


def _region(region: Region) -> dict[str, object]:
    return {
        "added": region.added,
        "at": list(region.at),
        "depth_mm": region.depth_mm,
        "length_mm": region.length_mm,
        "area_mm2": region.area_mm2,
    }


def _step(step: Step) -> dict[str, object]:
    return {
        "task": str(step.task),
        "at": list(step.at),
        "to_mm": step.to_mm,
        "from_mm": step.from_mm,
        "length_mm": step.length_mm,
    }
