"""The job file: TOML in, a checked Job out."""

from collections import Counter
from dataclasses import replace
from decimal import Decimal
from pathlib import Path
from typing import Any

from flatprep.base.errors import JobError
from flatprep.base.keys import keys_of
from flatprep.base.names import did_you_mean, one_line
from flatprep.base.units import MM_PER_UNIT
from flatprep.job import reference
from flatprep.job.context import Context, JobOptions, accepts, money, roles
from flatprep.job.corners import ReliefKind
from flatprep.job.cutlist import load_cutlist
from flatprep.job.parts import cells, part_of_row, read_part
from flatprep.job.rack import load_rack
from flatprep.job.reach import Reach
from flatprep.job.stocks import read_stock
from flatprep.job.terms import CostTerms, Discount, Share
from flatprep.job.values import Job, JobPart, Pilots, Rack, Stock, Tabs
from flatprep.job.works import read_joint
from flatprep.profile.material_load import all_materials
from flatprep.profile.process import Process
from flatprep.profile.process_load import load_process
from flatprep.profile.toml_check import Table, read_toml
from flatprep.profile.where import ids

KEYS = keys_of(reference.TOP)
"""Every key at the top of a job file."""

AS_DRAWN, MEASURED = "as-drawn", "measured"
"""Words of ``relief`` and ``slots``."""
SLOT_CLEARANCE_MM = 0.1
"""What a joint of sheets needs to go together by hand (common practice)."""

ETCH_HEIGHT_MM = (3.0, 10.0)
"""Height of etched letters that are read at arm's length (common practice)."""

COST_KEYS = keys_of(reference.COST)


def load_job(path: Path, options: JobOptions | None = None) -> Job:
    """Read and check a job file.

    Parameters
    ----------
    path
        The TOML file; paths in it are seen from its folder.
    options
        What the command line says.

    Raises
    ------
    JobError
        For every mistake: file, key, value and what is allowed.
    ProfileError
        When a profile that the job names is missing or wrong.
    """
    options = options or JobOptions()
    if path.is_dir():
        raise JobError(
            f"{path}: is a folder, not a job file",
            f"flatprep draft {path} --out {path / 'job.toml'} writes one from its drawings",
        )
    top = Table(read_toml(path, JobError), str(path), "", JobError).only(KEYS)
    unit = top.choice("units", tuple(MM_PER_UNIT), "mm")
    context = Context(unit, Reach(path.parent, options.anywhere), options, _overrides(top, options))
    process = _process(top, context, options)
    everywhere = accepts(top, context)
    usual = Tabs.SMALL if top.flag("tabs") else Tabs.NONE
    mates = _mates(top, context)
    parts = tuple(
        replace(p, accepts=(*p.accepts, *everywhere), tabs=p.tabs or usual, **mates)
        for p in _parts(top, context, process)
    )
    layers = {**roles(top, "layers"), **options.layers}
    rack = _rack(top, context)
    return Job(
        path=path,
        name=one_line(top.text("name") if top.has("name") else path.stem),
        revision=_revision(top),
        process=process,
        spacing_mm=context.length_mm(top, "spacing", process.spacing_mm, least=0.0),
        margin_mm=context.length_mm(top, "margin", process.margin_mm, least=0.0),
        parts=parts,
        stock=_stock(top, context, rack),
        rack=rack,
        etch_labels=top.flag("etch_labels") or options.etch,
        etch_height_mm=_heights(top, context),
        first_article=top.flag("first_article") or options.first_article,
        sets=top.integer("sets", 1, least=1),
        mass_limit_kg=top.optional_number("mass_limit", above=0.0),
        pilots=Pilots(top.choice("pilots", tuple(Pilots), Pilots.AS_DRAWN)),
        currency=_currency(top),
        units=unit,
        windows=top.optional_flag("windows"),
        layers=layers,
        accepts=everywhere,
        cost=_cost(top, context),
        joints=tuple(read_joint(one, context, tuple(p.name for p in parts)) for one in top.tables("joint")),
    )


def _mates(top: Table, context: Context) -> dict[str, Any]:
    """Return what is done in every part so that its mates fit, as fields of `JobPart`."""
    relief = top.choice("relief", (AS_DRAWN, *ReliefKind), AS_DRAWN)
    fitted = top.choice("slots", (AS_DRAWN, MEASURED), AS_DRAWN) == MEASURED
    if top.has("slot_clearance") and not fitted:
        raise top.fail("slot_clearance", f'left out, unless slots = "{MEASURED}"')
    clearance = context.length_mm(top, "slot_clearance", SLOT_CLEARANCE_MM, least=0.0)
    return {
        "relief": None if relief == AS_DRAWN else ReliefKind(relief),
        "slot_clearance_mm": clearance if fitted else None,
    }


def _revision(top: Table) -> str:
    value = top.get("revision")
    return str(value) if isinstance(value, int) and not isinstance(value, bool) else one_line(top.text("revision", ""))


def _currency(top: Table) -> str | None:
    if not top.has("currency"):
        return None
    code = top.text("currency")
    if len(code) != 3 or not code.isascii() or not code.isalpha() or not code.isupper():
        raise top.fail("currency", 'a code of three capital letters, such as "EUR"')
    return code


def _overrides(top: Table, options: JobOptions) -> dict[str, Table]:
    """Return the tables ``[material.ID]``, whose ids must be known."""
    given = top.named_tables("material")
    known = [material.id for material in all_materials(options.profile_folders)] if given else []
    for name, table in given.items():
        if name not in known:
            raise JobError(f'{top.place}: material."{name}": unknown material id', did_you_mean(name, known))
        table.only(("density", "price_per_kg"))
    return given


def _process(top: Table, context: Context, options: JobOptions) -> Process:
    if options.process:
        return load_process(options.process, options.profile_folders)
    if not top.has("process"):
        known = ", ".join(f'"{name}"' for name in ids("processes", options.profile_folders))
        raise top.need("process", f"one of {known}; or give --process")
    return context.process(top, "process")


def _parts(top: Table, context: Context, process: Process) -> tuple[JobPart, ...]:
    parts = [read_part(one, context, process) for one in top.tables("part")]
    if top.has("parts"):
        parts += _listed(top, context, process)
    if not parts:
        raise JobError(f"{top.place}: has no part", 'add [[part]] with drawing = "...", or parts = "cutlist.csv"')
    for name, times in Counter(part.name for part in parts).items():
        if times > 1:
            places = ", ".join(p.where.removeprefix(f"{top.file}: ") for p in parts if p.name == name)
            raise JobError(
                f'{top.place}: {times} parts are called "{name}": {places}', 'give each its own with name = "..."'
            )
    return tuple(parts)


def _listed(top: Table, context: Context, process: Process) -> list[JobPart]:
    path = context.reach.file(top, "parts", top.text("parts"))
    near = Context(context.unit, Reach(path.parent, context.reach.anywhere), context.options, context.overrides)
    out = []
    for row in load_cutlist(path):
        table = Table(cells(row), str(path), f"line {row.line}", JobError)
        if row.quantity + row.quantity_opposite == 0:
            raise JobError(f"{table.place}: quantity = 0", "take the line out, or begin it with #")
        out.append(part_of_row(row, table, near, process))
    return out


def _rack(top: Table, context: Context) -> Rack | None:
    """Return the rack that the command line names, else the job's, else None."""
    if context.options.rack is not None:
        return load_rack(context.options.rack, context)
    if not top.has("rack"):
        return None
    return load_rack(context.reach.directory(top, "rack", top.text("rack")), context)


def _stock(top: Table, context: Context, rack: Rack | None) -> tuple[Stock, ...]:
    """Return the job's own stock and the sheets of the rack; each name once."""
    stock = (*(read_stock(one, context) for one in top.tables("stock")), *(rack.sheets if rack else ()))
    for name, times in Counter(s.name for s in stock).items():
        if times > 1:
            places = ", ".join(s.where for s in stock if s.name == name)
            raise JobError(f'{top.place}: {times} stocks are called "{name}": {places}', "give each its own name")
    return stock


def _cost(top: Table, context: Context) -> CostTerms:
    table = top.table("cost")
    if table is None:
        return CostTerms()
    table.only(COST_KEYS)
    plain = CostTerms()
    credit = money(table, "offcut_credit") or Decimal(0)
    if credit > 1:
        raise table.fail("offcut_credit", "a share of the sheet's price from 0 to 1")
    return CostTerms(
        share=Share(table.choice("share", tuple(Share), plain.share)),
        machine_rate=money(table, "machine_rate"),
        offcut_credit=credit,
        offcut_least_mm=context.sides_mm(table, "offcut_least") if table.has("offcut_least") else plain.offcut_least_mm,
        scrap_per_kg=money(table, "scrap_per_kg") or Decimal(0),
        discounts=_discounts(table),
        breaks=_breaks(table) if table.has("breaks") else plain.breaks,
    )


def _heights(top: Table, context: Context) -> tuple[float, float]:
    if not top.has("etch_height"):
        return ETCH_HEIGHT_MM
    least, most = context.sides_mm(top, "etch_height")
    if least > most:
        raise top.fail("etch_height", "the least and the largest height, such as [3, 10]")
    return least, most


def _discounts(table: Table) -> tuple[Discount, ...]:
    out = []
    for one in table.tables("discount"):
        one.only(("from", "percent"))
        least, percent = money(one, "from"), money(one, "percent")
        if least is None or percent is None:
            raise one.need("from" if least is None else "percent", "a number")
        if percent > 100:
            raise one.fail("percent", "a number from 0 to 100")
        out.append(Discount(least, percent))
    return tuple(sorted(out, key=lambda d: d.least))


def _breaks(table: Table) -> tuple[int, ...]:
    numbers = table.numbers("breaks", least=1.0)
    if not numbers or any(n != int(n) for n in numbers):
        raise table.fail("breaks", "a list of whole numbers of sets, such as [1, 2, 5, 10, 25]")
    return tuple(sorted({int(n) for n in numbers}))


__all__ = ["COST_KEYS", "KEYS", "JobOptions", "load_job"]
