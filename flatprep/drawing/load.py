"""A DXF file opened by ezdxf: strictly, else with repair; and what the raw file says of its unit."""

import hashlib
import re
from contextlib import suppress
from dataclasses import dataclass
from io import BytesIO
from pathlib import Path

from ezdxf import recover
from ezdxf.document import Drawing as DxfDocument
from ezdxf.filemanagement import readfile

from flatprep.base.errors import DrawingError
from flatprep.drawing.limits import ReadLimits

_UNIT = re.compile(rb"\$INSUNITS\s+70\s+(\d+)")
_BINARY_HEAD = b"AutoCAD Binary DXF\r\n\x1a\x00"
_BINARY_UNIT = re.compile(rb"\$INSUNITS\x00\x46\x00(..)", re.DOTALL)
_CONFLICT = re.compile(rb"^(<{7}|={7}|>{7})(?: .*)?\r?$", re.MULTILINE)

UNIT_OF_CODE = {1: "in", 2: "ft", 4: "mm", 5: "cm", 6: "m"}
"""$INSUNITS codes of the units a shop draws in; others are said and need an option."""


@dataclass(frozen=True, slots=True)
class Loaded:
    """An opened file.

    Attributes
    ----------
    unit_code
        $INSUNITS as it stands in the raw header, None where it is missing: ezdxf's own default is no unit.
    recovered
        Whether the strict reader refused the file.
    conflicts
        Whether version-control conflict markers were taken out (the first side is kept).
    digest
        SHA-256 of the file's bytes, in hexadecimal.
    """

    document: DxfDocument
    unit_code: int | None
    recovered: bool
    conflicts: bool
    digest: str


def load(path: Path, limits: ReadLimits) -> Loaded:
    """Open a drawing.

    Raises
    ------
    DrawingError
        When it is missing, too large, no DXF, or so damaged that neither reader of ezdxf takes it.
    """
    data = _bytes_of(path, limits)
    digest = hashlib.sha256(data).hexdigest()
    conflicts = len(_CONFLICT.findall(data)) >= 3
    if conflicts:
        data = _first_side(data)
    document, recovered = _parse(path, data, changed=conflicts)
    return Loaded(document, unit_code(data), recovered, conflicts, digest)


def unit_code(data: bytes) -> int | None:
    """$INSUNITS of a raw file, ASCII or binary, or None where the header does not say."""
    if data.startswith(_BINARY_HEAD):
        found = _BINARY_UNIT.search(data)
        return int.from_bytes(found[1], "little") if found else None
    found = _UNIT.search(data)
    return int(found[1]) if found and len(found[1]) < 4 else None


def _bytes_of(path: Path, limits: ReadLimits) -> bytes:
    try:
        size = path.stat().st_size
        if size > limits.file_bytes:
            raise DrawingError(
                f"{path}: {size / 1e6:.0f} MB, more than the {limits.file_bytes / 1e6:.0f} MB that are read",
                "save only the outlines of the part",
            )
        data = path.read_bytes()
    except OSError as err:
        raise DrawingError(f"{path}: {err.strerror or err}", "give the path of a DXF drawing") from err
    if not data.strip(b"\x00 \r\n\t"):
        raise DrawingError(f"{path}: the file is empty", "export the drawing again")
    if data.startswith((b"%PDF", b"\x89PNG", b"PK\x03\x04", b"<svg", b"AC10")):
        raise DrawingError(f"{path}: not a DXF file", "export the drawing as DXF")
    return data


def _first_side(data: bytes) -> bytes:
    """Drop conflict markers and the second side of each conflict."""
    kept, second = [], False
    for line in data.split(b"\n"):
        mark = line[:7]
        if mark == b"<<<<<<<":
            second = False
        elif mark == b"=======":
            second = True
        elif mark == b">>>>>>>":
            second = False
        elif not second:
            kept.append(line)
    return b"\n".join(kept)


def _parse(path: Path, data: bytes, *, changed: bool) -> tuple[DxfDocument, bool]:
    # ezdxf and what lies under it raise more than DXFError on damaged files (struct, Unicode, index errors):
    # whatever a reader trips over is one damaged file, told to the person below
    if not changed:
        with suppress(Exception):
            return readfile(path), False
    try:
        return (recover.read(BytesIO(data)) if changed else recover.readfile(path))[0], True
    except Exception as err:
        reason = str(err).splitlines()[0][:160] if str(err) else type(err).__name__
        raise DrawingError(
            f"{path}: not readable as DXF ({reason})", "export the drawing again, as DXF R2000 or later"
        ) from err
