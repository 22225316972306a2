"""The counts in a rack's ``stock.toml``, changed where they stand: comments and order stay as they were."""

import re
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass, field
from pathlib import Path

from flatprep.base.errors import JobError
from flatprep.base.units import MM_PER_UNIT
from flatprep.job.context import Context, JobOptions
from flatprep.job.reach import Reach
from flatprep.profile.toml_check import Table, read_toml

_HEADER = re.compile(r"(?m)^[^\S\n]*\[\[?[^\S\n]*[\w.\"'-]+[^\S\n]*\]\]?[^\S\r\n]*(?:#[^\r\n]*)?(?=\r?$)")
_STOCK = re.compile(r"\s*\[\[\s*stock\s*\]\]")
_COUNT = re.compile(r"(?m)^([^\S\n]*count[^\S\n]*=[^\S\n]*)[0-9][0-9_]*")


@dataclass(frozen=True, slots=True)
class Kept:
    """What a rack keeps.

    Attributes
    ----------
    counts : mapping of str to int or None
        Sheets of each name; None where they are not counted.
    offcut_least_mm : (float, float)
        Sides of the smallest offcut that is put into it.
    """

    counts: Mapping[str, int | None] = field(default_factory=dict)
    offcut_least_mm: tuple[float, float] = (0.0, 0.0)


def load_kept(path: Path) -> Kept:
    """Read what a ``stock.toml`` says of keeping; a rack without one keeps every offcut.

    Raises
    ------
    JobError
        When the file cannot be read, or one of these values has a mistake.
    """
    if not path.exists():
        return Kept()
    top = Table(read_toml(path, JobError), str(path), "", JobError)
    counts = {one.text("name"): _count(one) for one in top.tables("stock")}
    if not top.has("offcut_least"):
        return Kept(counts)
    context = Context(top.choice("units", tuple(MM_PER_UNIT), "mm"), Reach(path.parent), JobOptions())
    return Kept(counts, context.sides_mm(top, "offcut_least"))


def _count(table: Table) -> int | None:
    if table.get("count") == "any" or table.get("length") == "open":
        return None
    return table.integer("count", 1)


def with_counts(path: Path, text: str, counts: Mapping[str, int]) -> str:
    """Return the text of a ``stock.toml`` with other counts.

    Parameters
    ----------
    path
        For messages.
    text
        As it is.
    counts
        By the stock's name.

    Raises
    ------
    JobError
        When a count stands where it cannot be changed safely.
    """
    for name, count in counts.items():
        text = _with_count(path, text, name, count)
    return text


def _with_count(path: Path, text: str, name: str, count: int) -> str:
    data = tomllib.loads(text.removeprefix("\ufeff").replace("\r\n", "\n"))
    names = [str(table.get("name")) for table in data["stock"]]
    number = names.index(name)
    data["stock"][number]["count"] = count
    changed = _changed(text, number, count)
    if changed is None or not _says(changed, data):
        raise JobError(
            f'{path}: the count of "{name}" cannot be changed where it stands',
            f"write it as [[stock]] with count = {count} on a line of its own, then run again",
        )
    return changed


def _changed(text: str, number: int, count: int) -> str | None:
    """Return the text with the count of the `number`-th ``[[stock]]``, or None where there is no such table."""
    headers = list(_HEADER.finditer(text))
    own = [n for n, header in enumerate(headers) if _STOCK.match(header[0])]
    if number >= len(own):
        return None
    begin = headers[own[number]].end()
    end = headers[own[number] + 1].start() if own[number] + 1 < len(headers) else len(text)
    inside, times = _COUNT.subn(rf"\g<1>{count}", text[begin:end], count=1)
    if not times:
        line_end = "\r\n" if "\r\n" in text else "\n"
        inside = f"{line_end}count = {count}{inside}"
    return text[:begin] + inside + text[end:]


def _says(text: str, data: Mapping[str, object]) -> bool:
    try:
        return tomllib.loads(text.removeprefix("\ufeff").replace("\r\n", "\n")) == data
    except tomllib.TOMLDecodeError:
        return False
