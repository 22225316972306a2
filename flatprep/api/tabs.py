"""What holds the small parts of a job: tabs where the job asks for them, else a warning."""

from collections.abc import Iterator, Mapping

from flatprep.api.pieces import Piece, ReadJob
from flatprep.base.errors import OutputError
from flatprep.bench.tabs import kerf_mm, lies_free, tabs_of, wants_tabs
from flatprep.drawing.forms import with_kerf
from flatprep.drawing.gaps import tabbed
from flatprep.drawing.write import lines_drawing
from flatprep.model.drawing import Part
from flatprep.model.layout import SheetLayout
from flatprep.model.tab import Tab
from flatprep.practice.tabs import free_limit_mm
from flatprep.profile.process import ProcessKind

FATE = {
    ProcessKind.ROUTER: "they may come off the vacuum and fly",
    ProcessKind.LASER: "they may fall between the slats, or tip up into the way of the head",
    ProcessKind.PLASMA: "they may fall between the slats, or tip up into the way of the torch",
    ProcessKind.WATERJET: "they may fall between the slats, or tip up into the way of the jet",
}


def job_tabs(read: ReadJob) -> Mapping[str, tuple[Tab, ...]]:
    """Return the tabs of each part that has some."""
    found = {piece.name: tabs_of(piece.bench) for piece in read.pieces}
    return {name: tabs for name, tabs in found.items() if tabs}


def tab_warnings(read: ReadJob) -> tuple[str, ...]:
    """Say which parts are too small to lie free and are held by nothing."""
    return (*_loose(read), *_without_place(read), *_as_drawn(read))


def _loose(read: ReadJob) -> Iterator[str]:
    loose: dict[tuple[str, float], list[Piece]] = {}
    for piece in read.pieces:
        bench = piece.bench
        least = free_limit_mm(bench.process.limit("part", bench.family, bench.thickness_mm))
        if least is not None and not lies_free(bench) and not wants_tabs(bench):
            loose.setdefault((bench.process.id, least), []).append(piece)
    for (process, least), pieces in loose.items():
        names = ", ".join(piece.name for piece in pieces)
        yield (
            f"smaller than {process} lets parts lie free ({least:g} mm): {names}: "
            f"{FATE[pieces[0].bench.process.kind]}; tabs = true in the job holds them"
        )


def _without_place(read: ReadJob) -> Iterator[str]:
    for piece in read.pieces:
        bench = piece.bench
        if wants_tabs(bench) and not tabs_of(bench):
            width = bench.process.tabs.width(bench.thickness_mm)
            yield (
                f"{piece.name}: no stretch of its outline that is clear of corners, bends and fits has room for a tab "
                f"of {width:.2g} mm: hold it otherwise"
            )


def _as_drawn(read: ReadJob) -> Iterator[str]:
    """Say which parts the file with the gaps holds as drawn: some contour of theirs is narrower than the kerf."""
    if job_tabs(read):
        for piece in read.pieces:
            try:
                with_kerf(piece.part, kerf_mm(piece.bench))
            except OutputError as err:
                yield f"{err.message}: sheet-NN-tabs.dxf has this part as drawn, without the kerf"


def _path(piece: Piece) -> Part:
    """Return the part with its contours where the middle of the cut runs; as drawn where one does not survive that."""
    try:
        return with_kerf(piece.part, kerf_mm(piece.bench))
    except OutputError:
        return piece.part


def tab_notes(read: ReadJob) -> tuple[str, ...]:
    """Say which parts are held by tabs, and in which files the gaps are."""
    held = [f"{name} ({len(tabs)} of {tabs[0].width_mm:.2g} mm)" for name, tabs in job_tabs(read).items()]
    if not held:
        return ()
    return (f"holding tabs: {', '.join(held)}; sheet-NN-tabs.dxf has the gaps, the kerf is allowed for in it",)


def tabs_drawing(sheet: SheetLayout, read: ReadJob, tabs: Mapping[str, tuple[Tab, ...]]) -> str | None:
    """DXF text of a sheet's cut lines with gaps where tabs stand; None where none of its parts has any."""
    laid = {p.part for p in sheet.placements}
    if not laid & tabs.keys():
        return None
    pieces = [piece for piece in read.pieces if piece.name in laid]
    kerf = {piece.name: kerf_mm(piece.bench) for piece in pieces}
    paths = {piece.name: _path(piece) for piece in pieces}
    return lines_drawing(tabbed(sheet, paths, {n: t for n, t in tabs.items() if n in laid}, kerf))
