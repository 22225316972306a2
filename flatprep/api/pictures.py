"""Pictures of checked parts as files: one SVG a part."""

from pathlib import Path

import numpy as np

from flatprep.base.files import make_folder, write_whole
from flatprep.base.safe_names import safe_stem
from flatprep.geom.bulge import Floats
from flatprep.measure.part import MeasuredPart
from flatprep.measure.reach import unreached_regions
from flatprep.model.drawing import Part
from flatprep.model.linted import LintReport
from flatprep.report.part_svg import Unreached, part_pictures


def write_pictures(report: LintReport, folder: Path, units: str | None = None) -> tuple[Path, ...]:
    """Draw every part with its findings into `folder`, named after the part; a name that is taken gets a number.

    Lengths are shown in `units`, else in each drawing's own.

    Returns
    -------
    tuple of Path
        The files, in the order of the report.

    Raises
    ------
    OutputError
        When the folder cannot be written into.
    """
    make_folder(folder)
    written: dict[Path, None] = {}  # a dict keeps the order
    for one in report.linted:
        radius_mm = one.tool_radius_mm
        unreached = {part.name: _unreached(part, radius_mm) for part in one.drawing.parts} if radius_mm > 0.0 else {}
        for name, svg in part_pictures(one, unreached, units):
            file = _free(folder / f"{safe_stem(name)}.svg", written)
            write_whole(file, svg)
            written[file] = None
    return tuple(written)


def _unreached(part: Part, radius_mm: float) -> Unreached:
    """Return what the tool leaves in a part, for the picture."""
    found = unreached_regions(MeasuredPart(part), radius_mm)
    rings: list[tuple[Floats, ...]] = [
        tuple(np.asarray(ring.coords)[:, :2] for ring in (region.shape.exterior, *region.shape.interiors))
        for region in found
    ]
    return Unreached(2.0 * radius_mm, sum(region.area_mm2 for region in found), tuple(rings))


def _free(wanted: Path, taken: dict[Path, None]) -> Path:
    file, number = wanted, 1
    while file in taken:
        number += 1
        file = wanted.with_name(f"{wanted.stem}-{number}.svg")
    return file
