"""What was booked as one JSON document, ``flatprep-book/1``; figures unrounded."""

from flatprep.model.booked import Booked, BookedSheet, Offcut

SCHEMA = "flatprep-book/1"


def book_document(booked: Booked) -> dict[str, object]:
    """Return the document as plain values."""
    return {"schema": SCHEMA, "rack": booked.rack.as_posix(), "sheets": [_sheet(sheet) for sheet in booked.sheets]}


def _sheet(sheet: BookedSheet) -> dict[str, object]:
    return {
        "sheet": sheet.number,
        "stock": sheet.stock,
        "taken": str(sheet.taken),
        "left": sheet.left,
        "offcut": None if sheet.offcut is None else _offcut(sheet.offcut),
    }


def _offcut(one: Offcut) -> dict[str, object]:
    return {
        "label": one.label,
        "drawing": f"{one.label}.dxf",
        "material": one.material,
        "thickness_mm": one.thickness_mm,
        "rectangle_mm": [one.length_mm, one.width_mm],
    }
