"""Cut lists: one row a drawing, as spreadsheets write them."""

import csv
import re
from dataclasses import dataclass
from pathlib import Path

from flatprep.base.errors import JobError
from flatprep.base.names import did_you_mean

NAME = "cutlist.csv"
NEEDED = ("file", "material", "thickness", "quantity")
OPTIONAL = ("quantity_opposite", "revision", "note", "name")
_MOST_BYTES = 20_000_000


@dataclass(frozen=True, slots=True)
class CutRow:
    """One row; texts as written, `line` is the line of the file."""

    file: str
    material: str
    thickness: str
    quantity: int
    quantity_opposite: int = 0
    revision: str = ""
    note: str = ""
    name: str = ""
    line: int = 0


def find_cutlist(folder: Path) -> Path | None:
    """Return the cut list of a folder (its name in any case), or None."""
    exact = folder / NAME
    if exact.is_file():
        return exact
    return next((file for file in sorted(folder.iterdir()) if file.name.lower() == NAME and file.is_file()), None)


def load_cutlist(path: Path) -> tuple[CutRow, ...]:
    """Read a cut list: comma, semicolon or tab between the columns, any line ends, with or without a byte order mark.

    Empty lines and lines that begin with ``#`` are passed over. A thickness may have a decimal comma.

    Raises
    ------
    JobError
        When the file cannot be read, a column is missing or unknown, or a row has a mistake (with its line).
    """
    text = _text(path)
    lines = [(n, line) for n, line in enumerate(text.splitlines(), 1) if line.strip(" \t,;") and line[:1] != "#"]
    if not lines:
        raise JobError(f"{path}: is empty", f"first line: {','.join(NEEDED)}")
    separator = max(",;\t", key=lines[0][1].count)
    header = _header(path, lines[0][0], _split(path, *lines[0], separator))
    rows = tuple(_row(path, n, header, _split(path, n, line, separator)) for n, line in lines[1:])
    if not rows:
        raise JobError(f"{path}: has no row below its header", "add one line a drawing")
    return rows


def _text(path: Path) -> str:
    try:
        if path.exists() and not path.is_file():
            raise JobError(f"{path}: is no file", "name the cut list itself")
        if path.stat().st_size > _MOST_BYTES:
            raise JobError(f"{path}: is larger than {_MOST_BYTES // 1_000_000} MB", "that is no cut list")
        raw = path.read_bytes()
    except OSError as err:
        raise JobError(f"{path}: cannot be read ({err.strerror or err})", "check the path and its rights") from None
    if raw[:2] in (b"\xff\xfe", b"\xfe\xff"):
        return raw.decode("utf-16", errors="replace")
    try:
        return raw.decode("utf-8-sig")
    except UnicodeDecodeError:
        return raw.decode("cp1252", errors="replace")


def _split(path: Path, number: int, line: str, separator: str) -> list[str]:
    try:
        return [cell.strip() for cell in next(csv.reader([line], delimiter=separator, strict=True))]
    except (csv.Error, StopIteration) as err:
        raise JobError(f"{path}: line {number}: {err}", 'close every "quoted" cell') from None


def _header(path: Path, number: int, names: list[str]) -> list[str]:
    header = [name.lower().replace(" ", "_") for name in names]
    while header and not header[-1]:
        header.pop()
    for name in header:
        if name not in NEEDED + OPTIONAL:
            known = NEEDED + OPTIONAL
            raise JobError(
                f'{path}: line {number}: unknown column "{name}"',
                f"{did_you_mean(name, known)} (columns: {', '.join(known)})",
            )
    twice = [name for name in header if header.count(name) > 1]
    missing = [name for name in NEEDED if name not in header]
    if twice or missing:
        fault = f"column {twice[0]} stands twice" if twice else f"column {missing[0]} is missing"
        raise JobError(f"{path}: line {number}: {fault}", f"first line: {','.join(NEEDED)}")
    return header


def _row(path: Path, number: int, header: list[str], given: list[str]) -> CutRow:
    if any(given[len(header) :]):
        raise JobError(
            f"{path}: line {number}: {len(given)} cells for {len(header)} columns",
            "put a cell that holds the separator in double quotes",
        )
    cell = dict.fromkeys(NEEDED + OPTIONAL, "") | dict(zip(header, given, strict=False))
    if not cell["file"]:
        raise JobError(f"{path}: line {number}: file is empty", "name the drawing")
    if re.fullmatch(r"\d+,\d+\D*", cell["thickness"]):
        cell["thickness"] = cell["thickness"].replace(",", ".")
    return CutRow(
        file=cell["file"].replace("\\", "/"),
        material=cell["material"],
        thickness=cell["thickness"],
        quantity=_whole(path, number, "quantity", cell["quantity"] or "1"),
        quantity_opposite=_whole(path, number, "quantity_opposite", cell["quantity_opposite"] or "0"),
        revision=cell["revision"],
        note=cell["note"],
        name=cell["name"],
        line=number,
    )


def _whole(path: Path, number: int, key: str, text: str) -> int:
    match = re.fullmatch(r"(\d{1,6})(?:[.,]0+)?", text)
    if match is None:
        raise JobError(f'{path}: line {number}: {key} = "{text}": must be a whole number from 0 to 999999')
    return int(match[1])
