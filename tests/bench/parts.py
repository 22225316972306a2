"""Plates with holes, and what is asked of them."""

from dataclasses import replace

import numpy as np

from flatprep.bench.part import BenchPart
from flatprep.geom import bulge
from flatprep.job.values import Pilots, Work
from flatprep.model.drawing import Contour, Curve, Part
from flatprep.profile.material_load import load_material
from flatprep.profile.process_load import load_process


def plate(width: float, height: float, *holes: tuple[float, float, float], name: str = "plate") -> Part:
    """A rectangle from the origin with round holes, each x, y, diameter."""
    corners = np.array([(0, 0, 0), (width, 0, 0), (width, height, 0), (0, height, 0)], dtype=float)
    circles = tuple(Contour(bulge.reverse(bulge.circle(x, y, d / 2), closed=True), ("h", "h")) for x, y, d in holes)
    return Part(name, Contour(corners, ("o",) * 4), circles)


def line(x0: float, y0: float, x1: float, y1: float, layer: str = "BEND") -> Curve:
    """A bend line."""
    return Curve(np.array([(x0, y0, 0.0), (x1, y1, 0.0)]), closed=False, layer=layer)


def work(kind: str, size: str, **more) -> Work:
    """A piece of work as the job file gives it."""
    return Work(kind, size, where=f"job.toml: part 1 (plate), work 1 ({kind})", **more)


def bench(part: Part, *works: Work, process="fibre-laser", material="mild-steel", thickness=3.0, **more) -> BenchPart:
    """A part on the bench."""
    made_of = load_material(material) if material else None
    more.setdefault("pilots", Pilots.AS_DRAWN)
    return BenchPart(
        part.name, part, load_process(process), 2, made_of, thickness, tuple(works), where="job.toml: part 1", **more
    )


def with_bends(part: Part, *lines: Curve) -> Part:
    """The part with bend lines."""
    return replace(part, bends=lines)
