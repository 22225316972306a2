"""Shared cuts of a layout: where neighbours lie exactly a kerf apart, one cut does for both."""

from dataclasses import replace

from flatprep.api.nest import Nested
from flatprep.api.pieces import ReadJob
from flatprep.base.errors import JobError
from flatprep.bench.tabs import kerf_mm
from flatprep.drawing.forms import Form, with_kerf
from flatprep.drawing.shared import SAME_MM, SharedCuts, shared_cuts
from flatprep.model.layout import SheetLayout

CAUTION = (
    "shared cuts: the part cut first takes the support of its neighbour away, and the kerf comes off both: "
    "try it on scrap, hold small parts, and follow the machine's manual"
)


def check_forms(read: ReadJob, also: tuple[Form, ...]) -> None:
    """Refuse, before anything is searched, forms that no sheet of the job can have.

    Raises
    ------
    JobError
        When shared cuts are asked for and the spacing is no part's kerf.
    OutputError
        When the kerf is to be allowed for and a contour does not survive that.
    """
    if Form.KERF in also or Form.SHARED in also:
        for piece in read.pieces:
            with_kerf(piece.part, kerf_mm(piece.bench))
    if Form.SHARED not in also:
        return
    kerfs = sorted({round(kerf_mm(piece.bench), 3) for piece in read.pieces})
    spacing = read.job.spacing_mm
    if all(abs(spacing - kerf) > SAME_MM for kerf in kerfs):
        listed = ", ".join(f"{kerf:g} mm" for kerf in kerfs)
        raise JobError(
            f"{read.job.path}: spacing {spacing:g} mm: --also shared needs a spacing of just the kerf ({listed})",
            f"set spacing = {kerfs[0]:g}, or leave --also shared out",
        )


def with_forms(nested: Nested, also: tuple[Form, ...]) -> Nested:
    """Return a nest that is also written in other forms, with what is worth knowing of them."""
    if Form.SHARED not in also:
        return replace(nested, also=also)
    notes = [_note(number, sheet_shared(sheet, nested.read)) for number, sheet in enumerate(nested.layout.sheets, 1)]
    return replace(nested, also=also, notes=(*nested.notes, *notes), warnings=(*nested.warnings, CAUTION))


def sheet_shared(sheet: SheetLayout, read: ReadJob) -> SharedCuts:
    """Return the cut lines of a sheet, each stretch that two parts have in common once."""
    laid = {p.part for p in sheet.placements}
    pieces = [piece for piece in read.pieces if piece.name in laid]
    return shared_cuts(sheet, {piece.name: with_kerf(piece.part, kerf_mm(piece.bench)) for piece in pieces})


def _note(number: int, shared: SharedCuts) -> str:
    if not shared.stretches:
        return f"sheet {number}: no two straight edges lie just a kerf apart: no cut is shared"
    edges = "one edge" if shared.stretches == 1 else f"{shared.stretches} edges"
    return f"sheet {number}: {edges} cut for two parts at once, {shared.saved_mm:.0f} mm less to cut"
