"""Book the sheets of a layout as cut: out of the rack what they took, into it what they left."""

import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from datetime import date
from itertools import chain, count
from pathlib import Path

import numpy as np

from flatprep.api.stored import Stored, stored, stored_parts
from flatprep.base.errors import UsageError
from flatprep.base.journal import Changes, change_together, finish
from flatprep.drawing.label import RemnantLabel, label_lines, thickness_text
from flatprep.drawing.read import read
from flatprep.drawing.remnant import outline_of
from flatprep.drawing.write import border_drawing
from flatprep.job.booked import FILE, Booking, load_bookings, with_bookings
from flatprep.job.counts import load_kept, with_counts
from flatprep.job.rack import LIST, USED
from flatprep.model.booked import Booked, BookedSheet, Offcut, Taken
from flatprep.model.drawing import Part
from flatprep.model.layout import SheetLayout
from flatprep.nest.offcut import Offcut as Rest
from flatprep.nest.offcut import offcut_of
from flatprep.nest.problem import Item, NestAsk, StockSheet
from flatprep.nest.verify import verify
from flatprep.report.layout_json import StockSource, sheet_name

_LABEL = re.compile(r"R(\d{1,9})")
_LABELLED = re.compile(rb"label\s*[:=]\s*R(\d{1,9})\b", re.IGNORECASE)
SAME_MM = 1e-6


@dataclass(frozen=True, slots=True)
class BookAsk:
    """What is to be booked.

    Attributes
    ----------
    layout : Path
    rack : Path
    day : date
    sheets : tuple of int
        From 1; empty for all that carry something.
    again : bool
        The layout has been booked, and was cut once more.
    """

    layout: Path
    rack: Path
    day: date
    sheets: tuple[int, ...] = ()
    again: bool = False


def book(ask: BookAsk) -> Booked:
    """Take what the sheets of a layout used out of a rack, and add their offcuts to it: all of it or nothing.

    Counts in the rack's ``stock.toml`` go down, drawings of remnants go into its folder ``used``, each offcut gets a
    drawing with a label of its own, and every sheet a line in ``booked.toml``. Job files are never touched.

    Raises
    ------
    UsageError
        When the layout is not sound, a sheet has been booked before, or is not in the rack any more.
    JobError
        When ``stock.toml`` or ``booked.toml`` has a mistake.
    DrawingError
        When a drawing of a part or a remnant cannot be read.
    OutputError
        When the rack cannot be written.
    """
    finish(ask.rack)
    found = stored(ask.layout)
    numbers = _numbers(found, ask.sheets)
    before = load_bookings(ask.rack)
    if not ask.again:
        _refuse_twice(found, numbers, before)
    changes, done = _planned(ask, found, numbers, before)
    change_together(ask.rack, changes)
    return Booked(ask.rack, done)


def _planned(
    ask: BookAsk, found: Stored, numbers: Sequence[int], before: Sequence[Booking]
) -> tuple[Changes, tuple[BookedSheet, ...]]:
    """Return what is to be changed in the rack, and what becomes of each sheet."""
    parts = stored_parts(found)
    _refuse_unsound(found, parts)
    kept = load_kept(ask.rack / LIST)
    counts, labels = _Counts(ask.rack / LIST, kept.counts), _labels(ask.rack, before)
    done: list[BookedSheet] = []
    writes, moves = dict[str, str](), list[tuple[str, str]]()
    for number in numbers:
        sheet, source = found.layout.sheets[number - 1], found.sheets[number - 1]
        taken, left = counts.take(sheet, source.rack_file)
        if taken is Taken.REMNANT:
            moves.append((source.rack_file, _retired(ask.rack, sheet, source, number)))
        rest = offcut_of(sheet, parts, found.layout.spacing_mm, source.keep_out)
        offcut = _offcut(next(labels), sheet, rest) if rest and _worth(rest, kept.offcut_least_mm) else None
        if rest and offcut:
            writes[f"{offcut.label}.dxf"] = _drawing(rest, offcut, source, f"rest of sheet {number} of {found.job}")
        done.append(BookedSheet(number, sheet.stock, taken, left, offcut))
    writes |= counts.changed()
    writes[FILE] = _book_text(ask, found, done)
    return Changes(writes, moves), tuple(done)


def _numbers(found: Stored, asked: Sequence[int]) -> tuple[int, ...]:
    """Return the numbers of the sheets to book."""
    full = [n for n, sheet in enumerate(found.layout.sheets, 1) if sheet.placements]
    strange = [n for n in asked if n not in full]
    if strange or not full:
        have = f"it has sheets {full[0]} to {full[-1]}" if full else "nothing lies on any sheet of it"
        what = f"no sheet {strange[0]}" if strange else "nothing to book"
        raise UsageError(f"{found.path}: {what}", have)
    return tuple(sorted(set(asked))) if asked else tuple(full)


def _refuse_twice(found: Stored, numbers: Sequence[int], before: Sequence[Booking]) -> None:
    days = {one.sheet: one.day for one in before if one.layout == found.digest}
    twice = [n for n in numbers if n in days]
    if not twice:
        return
    rest = [n for n in numbers if n not in days]
    others = f"book the others with {' '.join(f'--sheet {n}' for n in rest)}, or " if rest else ""
    named = ", ".join(f"{sheet_name(n)} ({days[n]})" for n in twice)
    raise UsageError(
        f"{found.path}: booked already: {named}", f"{others}say --again if these sheets have been cut once more"
    )


def _refuse_unsound(found: Stored, parts: Mapping[str, Part]) -> None:
    """Hold a layout against itself: its parts as their drawings are now, on its own sheets."""
    layout = replace(
        found.layout,
        sheets=tuple(replace(s, stock=str(n)) for n, s in enumerate(found.layout.sheets, 1)),
    )
    strange = [p.part for s in layout.sheets for p in s.placements if p.part not in parts]
    if strange:
        raise UsageError(f"{found.path}: places {strange[0]!r}, which is not among its parts", "nest anew")
    made_of = {p.part: sheet for sheet in layout.sheets for p in sheet.placements}
    items = tuple(
        Item(parts[p.name], made_of[p.name].material, made_of[p.name].thickness_mm, p.quantity, may_flip=True)
        for p in found.parts
        if p.name in made_of
    )
    left = tuple(u for u in layout.unplaced if u.part in made_of)
    stock = tuple(_as_stock(s, source) for s, source in zip(layout.sheets, found.sheets, strict=True))
    faults = verify(replace(layout, unplaced=left), NestAsk(items, stock, layout.spacing_mm, layout.margin_mm))
    if faults:
        more = f" and {len(faults) - 1} more" if len(faults) > 1 else ""
        raise UsageError(
            f"{found.path}: not sound: {faults[0].message}{more}", "mend the layout, or put back the drawings it was of"
        )


def _as_stock(sheet: SheetLayout, source: StockSource) -> StockSheet:
    width = float(np.ptp(sheet.outline[:, 1]))
    return StockSheet(
        sheet.stock, sheet.material, sheet.thickness_mm, None, width, sheet.outline, sheet.holes,
        margins_mm=source.margins_mm, keep_out=source.keep_out,
    )  # fmt: skip


class _Counts:
    """The counts of a rack's ``stock.toml``, going down.

    Raises
    ------
    UsageError
        When more is taken than there is.
    """

    def __init__(self, path: Path, counts: Mapping[str, int | None]) -> None:
        self._path, self._before, self._now = path, counts, dict(counts)

    def take(self, sheet: SheetLayout, rack_file: str) -> tuple[Taken, int | None]:
        """Take one sheet; what it was, and how many are left."""
        if not rack_file:
            return Taken.OWN, None
        if rack_file != LIST:
            return Taken.REMNANT, None
        if sheet.stock not in self._now:
            raise UsageError(f"{self._path}: has no stock {sheet.stock!r} any more", "nest anew from the rack as it is")
        count = self._now[sheet.stock]
        if count is None:
            return Taken.UNCOUNTED, None
        if count == 0:
            had = self._before[sheet.stock]
            raise UsageError(
                f"{self._path}: the layout takes more sheets of {sheet.stock!r} than the {had} that are left",
                "correct the count, or nest anew from the rack as it is",
            )
        self._now[sheet.stock] = count - 1
        return Taken.COUNTED, count - 1

    def changed(self) -> dict[str, str]:
        """Return the file with its new counts, by name; nothing where none has changed."""
        new = {name: n for name, n in self._now.items() if n is not None and n != self._before[name]}
        if not new:
            return {}
        return {LIST: with_counts(self._path, self._path.read_bytes().decode("utf-8"), new)}


def _retired(rack: Path, sheet: SheetLayout, source: StockSource, number: int) -> str:
    """Return where the drawing of a remnant goes; it must be there, and be what the layout was made on."""
    path = rack / source.rack_file
    if not path.resolve().is_relative_to(rack.resolve()):
        raise UsageError(f"{path}: lies outside the rack", "nest anew from the rack as it is")
    if not path.is_file():
        raise UsageError(
            f"{path}: not in the rack any more; {sheet_name(number)} was laid on it", "nest anew from the rack as it is"
        )
    outline, holes = outline_of(read(path))
    rings = [(outline, sheet.outline), *zip(holes, sheet.holes, strict=False)]
    if len(holes) != len(sheet.holes) or not all(
        a.shape == b.shape and np.allclose(a, b, 0.0, SAME_MM) for a, b in rings
    ):
        raise UsageError(
            f"{path}: is not the outline any more that {sheet_name(number)} was laid on",
            "nest anew from the rack as it is",
        )
    stem, suffix = source.rack_file.removesuffix(path.suffix), path.suffix
    more = (f"{USED}/{stem} ({k}){suffix}" for k in count(2))
    return next(name for name in chain([f"{USED}/{source.rack_file}"], more) if not (rack / name).exists())


def _labels(rack: Path, before: Sequence[Booking]) -> Iterator[str]:
    """Yield labels that no remnant has, or ever had: R0001, R0002, ...

    Drawings are looked through for what their texts say without being parsed.
    """
    drawings = [path for path in rack.rglob("*") if path.suffix.lower() == ".dxf" and path.is_file()]
    numbers = [found[1] for path in drawings for found in _LABELLED.finditer(path.read_bytes())]
    named = [_LABEL.fullmatch(name) for name in (*(p.stem for p in drawings), *(one.offcut for one in before))]
    last = max([0, *map(int, numbers), *(int(found[1]) for found in named if found)])
    while True:
        last += 1
        yield f"R{last:04d}"


def _worth(rest: Rest, least_mm: tuple[float, float]) -> bool:
    x0, y0, x1, y1 = rest.rectangle
    sides = sorted((x1 - x0, y1 - y0))
    return sides[0] >= min(least_mm) and sides[1] >= max(least_mm)


def _offcut(label: str, sheet: SheetLayout, rest: Rest) -> Offcut:
    x0, y0, x1, y1 = rest.rectangle
    return Offcut(label, sheet.material, sheet.thickness_mm, x1 - x0, y1 - y0)


def _drawing(rest: Rest, offcut: Offcut, source: StockSource, origin: str) -> str:
    """Return the drawing of an offcut, its lower left corner at the origin."""
    corner = rest.outline.min(axis=0)
    label = RemnantLabel(offcut.material, thickness_text(offcut.thickness_mm), offcut.label, source.grain)
    notes = (*label_lines(label), f"largest rectangle {offcut.length_mm:.0f} x {offcut.width_mm:.0f} mm", origin)
    return border_drawing(rest.outline - corner, [hole - corner for hole in rest.holes], notes=notes)


def _book_text(ask: BookAsk, found: Stored, done: Sequence[BookedSheet]) -> str:
    path = ask.rack / FILE
    more = [
        Booking(
            ask.day, found.job, found.digest, one.number, one.stock, found.sheets[one.number - 1].rack_file,
            one.offcut.label if one.offcut else "",
        )
        for one in done
    ]  # fmt: skip
    return with_bookings(path.read_text(encoding="utf-8-sig") if path.exists() else "", more)
