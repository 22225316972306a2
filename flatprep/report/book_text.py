"""What was booked, in words: what each sheet took out of the rack, and what to write on its offcut."""

from flatprep.model.booked import Booked, BookedSheet, Offcut, Taken
from flatprep.report.layout_json import sheet_name


def book_text(booked: Booked) -> str:
    """One line a sheet, then what to do with pen and rack."""
    lines = [_sheet(sheet) for sheet in booked.sheets]
    new = [sheet.offcut for sheet in booked.sheets if sheet.offcut]
    if new:
        lines.append("write on the offcuts and put into the rack:")
        lines += [_offcut(one) for one in new]
    count = len(booked.sheets)
    lines.append(
        f"{count} sheet{'s' if count > 1 else ''} booked, "
        f"{len(new)} offcut{'s' if len(new) != 1 else ''} added to {booked.rack}"
    )
    return "\n".join(lines)


def _sheet(sheet: BookedSheet) -> str:
    words = {
        Taken.COUNTED: f"one taken, {sheet.left} left",
        Taken.UNCOUNTED: "taken, not counted",
        Taken.REMNANT: "used up",
        Taken.OWN: "stock of the job, not of the rack: mind its count there",
    }
    rest = f"offcut {sheet.offcut.label}" if sheet.offcut else "no offcut worth keeping"
    return f"{sheet_name(sheet.number)}: {sheet.stock}: {words[sheet.taken]}; {rest}"


def _offcut(one: Offcut) -> str:
    size = f"holds {one.length_mm:.0f} x {one.width_mm:.0f} mm"
    return f"  {one.label}  {one.material} {one.thickness_mm:g} mm, {size}"
