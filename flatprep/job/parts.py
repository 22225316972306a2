"""The ``[[part]]`` tables of a job file, and the rows of a cut list, as parts."""

from collections.abc import Mapping
from pathlib import Path

from flatprep.base.keys import keys_of
from flatprep.base.names import one_line, printable
from flatprep.job import reference
from flatprep.job.context import Context, accepts, corners, roles
from flatprep.job.cutlist import CutRow
from flatprep.job.values import JobPart, Tabs
from flatprep.job.works import read_bend, read_work
from flatprep.profile.material import Material
from flatprep.profile.process import Process
from flatprep.profile.toml_check import Table

KEYS = keys_of(reference.PART)
"""Every key of a ``[[part]]``."""


def read_part(table: Table, context: Context, process: Process) -> JobPart:
    """Check one ``[[part]]``; `process` is the job's."""
    table = _titled(table).only(KEYS)
    material = context.material(table, "material")
    drawing = context.reach.file(table, "drawing", table.text("drawing"))
    quantity, opposite = _quantities(table)
    return JobPart(
        drawing=drawing,
        name=one_line(table.text("name") if table.has("name") else drawing.stem),
        material=material,
        thickness_mm=context.thickness_mm(table, "thickness", material),
        process=context.process(table, "process") if table.has("process") else process,
        quantity=quantity,
        quantity_opposite=opposite,
        turns_deg=_turns(table, material),
        may_flip=table.flag("may_flip"),
        grain=table.choice("grain", ("x", "y")) if table.has("grain") else None,
        drawing_units=context.drawing_units(table),
        work=tuple(read_work(one, context) for one in table.tables("work")),
        bends=tuple(read_bend(one, context) for one in table.tables("bend")),
        layers=roles(table, "layers"),
        revision=table.text("revision", ""),
        note=table.text("note", ""),
        filler=table.flag("filler"),
        finish=table.text("finish", ""),
        good_face=table.choice("good_face", ("A", "B")) if table.has("good_face") else None,
        accepts=accepts(table, context),
        corners=corners(table, context),
        etch_label=table.optional_flag("etch_label"),
        tabs=(Tabs.ALL if table.flag("tabs") else Tabs.NONE) if table.has("tabs") else None,
        own=context.options.profile_folders,
        where=table.place,
    )


def _titled(table: Table) -> Table:
    """Return the table with the part's name in its place, so that messages are found again."""
    called = table.data.get("name", table.data.get("drawing"))
    title = f"{table.where} ({called})" if isinstance(called, str) and called else table.where
    return Table(table.data, table.file, title, table.error)


def _quantities(table: Table) -> tuple[int, int]:
    opposite = table.integer("quantity_opposite", 0)
    quantity = table.integer("quantity", 1)
    if quantity + opposite == 0:
        raise table.fail("quantity", "1 or more, or quantity_opposite 1 or more (leave the part out to skip it)")
    return quantity, opposite


def _turns(table: Table, material: Material | None) -> tuple[float, ...] | None:
    """Return the allowed turns, None for free ones."""
    value = table.get("turns")
    if value is None:
        return default_turns(material)
    if value == "free":
        return None
    if not isinstance(value, list) or not value:
        raise table.fail("turns", '"free" or a list of degrees, such as [0, 90, 180, 270]')
    return table.numbers("turns")


def default_turns(material: Material | None) -> tuple[float, ...] | None:
    """Return free turning, or half turns for a material with a face grain."""
    return (0.0, 180.0) if material and material.face_grain else None


def part_of_row(row: CutRow, table: Table, context: Context, process: Process) -> JobPart:
    """Return the part that a row of a cut list asks for.

    Parameters
    ----------
    row
        A row that has been read.
    table
        The row's material, thickness and file as a table whose place is the line, for messages.
    context
        With the cut list's own folder.
    process
        The job's.
    """
    material = context.material(table, "material")
    drawing = context.reach.file(table, "file", row.file)
    return JobPart(
        drawing=drawing,
        name=one_line(row.name or Path(row.file).stem),
        material=material,
        thickness_mm=context.thickness_mm(table, "thickness", material),
        process=process,
        quantity=row.quantity,
        quantity_opposite=row.quantity_opposite,
        turns_deg=default_turns(material),
        drawing_units=context.options.units,
        revision=printable(row.revision),
        note=printable(row.note),
        own=context.options.profile_folders,
        where=table.place,
    )


def cells(row: CutRow) -> Mapping[str, object]:
    """Return the cells of a row that are not empty, as `part_of_row` reads them."""
    given = {"file": row.file, "material": row.material, "thickness": row.thickness}
    return {key: value for key, value in given.items() if value}
