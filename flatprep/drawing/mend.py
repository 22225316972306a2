"""Files that are nearly DXF: their tags put right, so that nothing in them is lost or misread.

Some programs leave out what readers rely on: marks of classes, a version that knows the entities used, the end of a
polyline, a section or the file. Others pad names with blanks, write a section twice or number entities with 0.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import pi

from flatprep.drawing.columns import CLASS, GROUP
from flatprep.drawing.plain import is_whole
from flatprep.drawing.records import COMMENT, HANDLES, Tags

_NAME = 2
_STRIPPED = {0, _NAME, 9, CLASS}
_CLASSES = {"LWPOLYLINE": "AcDbPolyline", "SPLINE": "AcDbSpline", "ELLIPSE": "AcDbEllipse", "MTEXT": "AcDbMText"}
"""Kinds that came with R13 and R14, and the class in which their own data stand."""
NEWER = frozenset(_CLASSES)
_OF_ALL = frozenset({5, 6, 8, 48, 60, 62, 67, GROUP, 330, 347, 348, 360, 370, 390, 410, 420, 430, 440})
"""Codes that entities of every kind may have."""
_ENTITY = "AcDbEntity"
_R2000 = "AC1015"


@dataclass(frozen=True, slots=True)
class Mended:
    """The tags of a file put right; `cut_short` where it ended within a section: what stood behind that is missing."""

    tags: Tags
    cut_short: bool


def mended(text: str) -> Mended:
    """Put the tags of a file right.

    Parameters
    ----------
    text
        The file, decoded, its lines ended by line feeds.

    Raises
    ------
    ValueError
        When a group code is no number: no tags to put right.
    """
    tags = _tags_of(text)
    sections, cut_short = _sections(_records(tags))
    newer = any(r.values[0] in NEWER for records in sections.values() for r in records)
    out = Tags()
    for name, records in sections.items():
        _extend(out, Tags([0, _NAME], ["SECTION", name]))
        for record in _headed(records) if name == "HEADER" and newer else records:
            _extend(out, _with_classes(_with_long_axis(_with_good_handle(record))))
        _extend(out, Tags([0], ["ENDSEC"]))
    if newer and "HEADER" not in sections:
        header = Tags([0, _NAME, 9, 1, 0], ["SECTION", "HEADER", "$ACADVER", _R2000, "ENDSEC"])
        out = Tags(header.codes + out.codes, header.values + out.values)
    _extend(out, Tags([0], ["EOF"]))
    return Mended(out, cut_short)


def _extend(out: Tags, more: Tags) -> None:
    out.codes.extend(more.codes)
    out.values.extend(more.values)


def _tags_of(text: str) -> Tags:
    """Tags of a text: comments and blank lines before codes left out, blanks around names off, half a tag dropped."""
    out = Tags()
    lines = iter(text.strip("\ufeff\x00\x1a \n").split("\n"))
    for line in lines:
        code, value = int(line) if line.strip() else COMMENT, next(lines, None) if line.strip() else None
        if value is not None and code != COMMENT:
            out.codes.append(code)
            out.values.append(value.strip() if code in _STRIPPED else value)
    return out


def _records(tags: Tags) -> Iterator[Tags]:
    """Part tags at each code 0; what stands before the first is left out."""
    starts = [k for k, code in enumerate(tags.codes) if code == 0]
    for start, end in zip(starts, [*starts[1:], len(tags.codes)], strict=True):
        yield Tags(tags.codes[start:end], tags.values[start:end])


def _sections(records: Iterator[Tags]) -> tuple[dict[str, list[Tags]], bool]:
    """Gather records by section, those of one name together; and tell whether the last section has no end."""
    out: dict[str, list[Tags]] = {}
    inside: list[Tags] | None = None
    for record in records:
        kind = record.values[0]
        if kind == "SECTION" and len(record.values) > 1:
            inside = out.setdefault(record.values[1], [])
            if len(record.codes) > 2:  # the variables of a header follow its name
                inside.append(Tags(record.codes[2:], record.values[2:]))
        elif kind in ("ENDSEC", "EOF"):
            inside = None if kind == "ENDSEC" else inside
            if kind == "EOF":
                break
        elif inside is not None:
            _close_polyline(inside, kind)
            inside.append(record)
    if inside and not is_whole(inside[-1].values[0], tuple(inside[-1].codes)):
        inside.pop()
    for each in out.values():
        _close_polyline(each, "")
    return out, inside is not None


def _close_polyline(records: list[Tags], following: str) -> None:
    if records and records[-1].values[0] == "VERTEX" and following not in ("VERTEX", "SEQEND"):
        records.append(Tags([0], ["SEQEND"]))


def _with_good_handle(record: Tags) -> Tags:
    """Leave out a handle that is none: a new one is given."""
    if record.codes[0] != 0:
        return record
    code = HANDLES.get(record.values[0], 5)
    keep = [k for k, c in enumerate(record.codes) if c != code or _is_handle(record.values[k])]
    return record if len(keep) == len(record.codes) else _picked(record, keep)


def _is_handle(value: str) -> bool:
    try:
        return int(value, 16) > 0
    except ValueError:
        return False


def stands_on_edge(codes: Sequence[int], values: Sequence[str]) -> bool:
    """Whether an ellipse names its shorter axis as the longer one: ezdxf would make a circle of it."""
    return float(values[codes.index(40)]) > 1.0 if 40 in codes else False


def _with_long_axis(record: Tags) -> Tags:
    """Turn the axes of an ellipse that names the shorter one first: its parameters then count from the other one."""
    if record.values[0] != "ELLIPSE" or not stands_on_edge(record.codes, record.values):
        return record
    values = {c: float(v) for c, v in zip(record.codes, record.values, strict=True) if c in (11, 21, 40, 41, 42, 230)}
    ratio, up = values[40], -1.0 if values.get(230, 1.0) < 0 else 1.0
    new = {
        11: -up * ratio * values[21],
        21: up * ratio * values[11],
        40: 1.0 / ratio,
        41: values.get(41, 0.0) - pi / 2,
        42: values.get(42, 2 * pi) - pi / 2,
    }
    return Tags(record.codes, [str(new.get(c, v)) for c, v in zip(record.codes, record.values, strict=True)])


def _with_classes(record: Tags) -> Tags:
    """Mark where the data of all entities and those of its own class begin, where either is missing."""
    own = _CLASSES.get(record.values[0])
    marks = {v for c, v in zip(record.codes, record.values, strict=True) if c == CLASS}
    if own is None or record.codes[0] != 0 or marks >= {_ENTITY, own}:
        return record
    common = [k for k, code in enumerate(record.codes) if code in _OF_ALL]
    rest = [k for k, code in enumerate(record.codes) if code not in _OF_ALL | {0, CLASS}]
    head, tail = _picked(record, common), _picked(record, rest)
    return Tags(
        [0, CLASS, *head.codes, CLASS, *tail.codes],
        [record.values[0], _ENTITY, *head.values, own, *tail.values],
    )


def _picked(record: Tags, places: Sequence[int]) -> Tags:
    return Tags([record.codes[k] for k in places], [record.values[k] for k in places])


def _headed(records: Sequence[Tags]) -> Iterator[Tags]:
    """Yield the header with a version that knows the entities used."""
    for header in records or [Tags()]:
        if "$ACADVER" not in header.values:
            yield Tags([9, 1, *header.codes], ["$ACADVER", _R2000, *header.values])
            continue
        at = header.values.index("$ACADVER") + 1
        values = list(header.values)
        version = values[at].strip()
        values[at] = max(version, _R2000) if version.startswith("AC") else _R2000
        yield Tags(header.codes, values)
