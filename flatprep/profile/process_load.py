"""Process profiles: TOML in, a checked Process out."""

from collections.abc import Mapping, Sequence
from math import inf
from pathlib import Path

from flatprep.base.errors import ProfileError
from flatprep.base.keys import keys_of
from flatprep.base.names import did_you_mean
from flatprep.profile import reference
from flatprep.profile.points import Points
from flatprep.profile.process import FEATURES, SCALES, Band, Process, ProcessKind, TabRule, Terms
from flatprep.profile.toml_check import Table, read_toml
from flatprep.profile.where import candidate, ids

LIMIT_KEYS = tuple(f"{feature}_{scale}" for feature in FEATURES for scale in SCALES)
_BAND_KEYS = ("limits", "warn", "sources", "above", "upto")
_TERM_KEYS = ("limits", "warn", "sources", "thickness", "kerf_table", "feed_mm_min", "pierce_s", "band", "source")
KEYS = keys_of(reference.PROCESS)
"""Every key that the top of a process profile may have."""
TAB_KEYS = ("count", "width", "width_to_thickness", "every", "source")
USUAL_TABS = {
    ProcessKind.LASER: TabRule(2, 0.3, 0.1, 300.0),
    ProcessKind.ROUTER: TabRule(3, 5.0, 0.5, 250.0),
    ProcessKind.PLASMA: TabRule(2, 2.0, 0.3, 400.0),
    ProcessKind.WATERJET: TabRule(2, 1.0, 0.1, 300.0),
}
"""Tabs where a profile says nothing of them: common practice by kind."""


def load_process(name_or_file: str, own: Sequence[Path] = ()) -> Process:
    """Load a process by its id (own folders first, then those shipped) or from a TOML file.

    Raises
    ------
    ProfileError
        When there is no such profile (with the nearest ids), or a mistake in it (file, key, value, what is allowed).
    """
    is_file = name_or_file.endswith(".toml") or Path(name_or_file).name != name_or_file
    path = Path(name_or_file) if is_file else candidate("processes", name_or_file, own)
    if path is None:
        raise ProfileError(f'unknown process "{name_or_file}"', did_you_mean(name_or_file, ids("processes", own)))
    return parse_process(read_toml(path), str(path), path.stem)


def parse_process(data: Mapping[str, object], file: str, stem: str) -> Process:
    """Check the tables of a process profile; `file` is named in messages, `stem` becomes the id."""
    top = Table(data, file).only(KEYS)
    kind = ProcessKind(top.choice("kind", tuple(ProcessKind)))
    tool = top.length_mm("tool_diameter", 0.0, least=0.0)
    if kind is ProcessKind.ROUTER and tool <= 0.0:
        raise top.need("tool_diameter", "3.0, the cutter's diameter in mm")
    if top.has("beam") and kind is not ProcessKind.LASER:
        raise top.fail("beam", 'left out: only kind = "laser" has a beam')
    spacing, margin = _room(kind, tool)
    limits = top.table("limits")
    families = {name: _terms(table, "") for name, table in top.named_tables("family").items()}
    return Process(
        id=stem,
        name=top.text("name", stem),
        kind=kind,
        kerf_mm=top.length_mm("kerf", tool, least=0.0),
        tool_diameter_mm=tool,
        spacing_mm=top.length_mm("spacing", spacing, least=0.0),
        margin_mm=top.length_mm("margin", margin, least=0.0),
        join_gap_mm=limits.length_mm("join_gap", 0.05, least=0.0) if limits else 0.05,
        bed_mm=_bed(top),
        windows=top.flag("windows", default=kind is not ProcessKind.ROUTER),
        source=top.text("source", ""),
        beam=top.choice("beam", ("fibre", "co2"), "") if top.has("beam") else "",
        power=top.text("power", ""),
        caution=top.text("caution", ""),
        slat_pitch_mm=top.length_mm("slat_pitch", above=0.0) if top.has("slat_pitch") else None,
        machine_rate=top.optional_number("machine_rate", least=0.0),
        direct_tap_mm=top.length_mm("direct_tap_up_to", least=0.0) if top.has("direct_tap_up_to") else None,
        pilot_under_mm=top.length_mm("pilot_under", least=0.0) if top.has("pilot_under") else None,
        tabs=_tabs(top.table("tabs"), USUAL_TABS[kind]),
        general=_terms(top, top.text("source", "")),
        families=families,
    )


def _room(kind: ProcessKind, tool_mm: float) -> tuple[float, float]:
    """Return the default spacing and margin, mm: common practice by kind."""
    return {
        ProcessKind.LASER: (3.0, 8.0),
        ProcessKind.ROUTER: (tool_mm + 3.0, 15.0),
        ProcessKind.PLASMA: (8.0, 12.0),
        ProcessKind.WATERJET: (4.0, 10.0),
    }[kind]


def _tabs(table: Table | None, usual: TabRule) -> TabRule:
    if table is None:
        return usual
    table.only(TAB_KEYS)
    return TabRule(
        count=table.integer("count", usual.count, least=1, most=100),
        width_mm=table.length_mm("width", usual.width_mm, above=0.0),
        width_to_thickness=table.number("width_to_thickness", 0.0, least=0.0),
        every_mm=table.length_mm("every", inf, above=0.0) if table.has("every") else inf,
        source=table.text("source", usual.source),
    )


def _bed(top: Table) -> tuple[float, float] | None:
    if not top.has("bed"):
        return None
    length, width = top.numbers("bed", count=2)
    if min(length, width) <= 0.0:
        raise top.fail("bed", "two lengths above 0 in mm, such as [3000, 1500]")
    return length, width


def _terms(table: Table, source: str) -> Terms:
    inner = bool(table.where)
    if inner:
        table.only(_TERM_KEYS)
    general = _band(table, extra=() if inner else ("join_gap",))
    bands = tuple(_band(band.only(_BAND_KEYS), extra=()) for band in table.tables("band"))
    span = table.numbers("thickness", count=2, least=0.0)
    if span and span[0] > span[1]:
        raise table.fail("thickness", "the least and the most thickness in mm, such as [0.5, 20]")
    return Terms(
        bands=(general, *bands),
        thickness_mm=(span[0], span[1]) if span else None,
        kerf=_rising(table, "kerf_table"),
        feed_mm_min=_rising(table, "feed_mm_min"),
        pierce_s=_rising(table, "pierce_s"),
        source=table.text("source", source),
    )


def _band(table: Table, extra: Sequence[str]) -> Band:
    errors, warns = (_values(table.table(key), extra) for key in ("limits", "warn"))
    above = table.length_mm("above", 0.0, least=0.0)
    upto = table.length_mm("upto", inf, above=above) if table.has("upto") else inf
    given = table.table("sources")
    named = {feature: given.text(feature) for feature in given.only(FEATURES).data} if given else {}
    touched = {key.rpartition("_to_")[0] or key.removesuffix("_min") for key in (*errors, *warns)}
    plain = dict.fromkeys(touched, table.text("source")) if table.has("source") else {}
    return Band(errors, warns, {**plain, **named}, above, upto)


def _values(table: Table | None, extra: Sequence[str]) -> dict[str, float]:
    if table is None:
        return {}
    table.only((*LIMIT_KEYS, *extra))
    return {
        key: table.length_mm(key, least=0.0) if key.endswith("_min") else table.number(key, least=0.0)
        for key in table.data
        if key not in extra
    }


def _rising(table: Table, key: str) -> Points:
    points = table.pairs(key)
    steps = [x for x, _ in points]
    if steps != sorted(set(steps)) or any(x < 0.0 or y <= 0.0 for x, y in points):
        raise table.fail(key, "pairs [thickness mm, value above 0] by rising thickness")
    return points
