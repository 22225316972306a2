"""A DXF file opened by ezdxf: strictly, else with repair; and what the raw file says of its unit."""

import hashlib
import re
from codecs import BOM_UTF16_BE, BOM_UTF16_LE
from collections.abc import Mapping
from contextlib import suppress
from dataclasses import dataclass, field
from io import BytesIO
from pathlib import Path
from typing import NamedTuple

from ezdxf import recover
from ezdxf.document import Drawing as DxfDocument
from ezdxf.filemanagement import dxf_file_info, readfile

from flatprep.base.errors import DrawingError
from flatprep.drawing.limits import ReadLimits
from flatprep.drawing.mend import mended
from flatprep.drawing.plain import Plain
from flatprep.drawing.records import OddFileError
from flatprep.drawing.sift import Sifted, sift

_UNIT = re.compile(rb"\$INSUNITS\s+70\s+(\d+)")
_BINARY_HEAD = b"AutoCAD Binary DXF\r\n\x1a\x00"
_BINARY_UNIT = re.compile(rb"\$INSUNITS\x00\x46\x00(..)", re.DOTALL)
_BYTES = "surrogateescape"
_USUAL_ENCODING = "cp1252"
_VERSION = re.compile(r"^\s*9\n\$ACADVER *\n\s*1\n *(\S*)", re.MULTILINE)
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
    cut_short
        Whether the file ends within a section: what stood behind that is missing.
    digest
        SHA-256 of the file's bytes, in hexadecimal.
    plain
        Entities of model space that are not in the document: they were read beside it.
    places
        Handle -> place among all entities of model space, for those in the document; the others know their own.
    """

    document: DxfDocument
    unit_code: int | None
    recovered: bool
    conflicts: bool
    cut_short: bool
    digest: str
    plain: tuple[Plain, ...] = ()
    places: Mapping[str, int] = field(default_factory=dict)


def load(path: Path, limits: ReadLimits) -> Loaded:
    """Open a drawing.

    Raises
    ------
    DrawingError
        When it is missing, too large, no DXF, or so damaged that neither reader of ezdxf takes it.
    """
    data = _bytes_of(path, limits)
    digest = hashlib.sha256(data).hexdigest()
    conflicts = b"<<<<<<<" in data and len(_CONFLICT.findall(data)) >= 3
    if conflicts:
        data = _first_side(data)
    opened = _open(path, data, changed=conflicts)
    document, sifted = opened.document, opened.sifted
    flags = opened.recovered, conflicts, opened.cut_short
    return Loaded(document, unit_code(data), *flags, digest, sifted.plain, sifted.places)


def load_whole(path: Path, limits: ReadLimits) -> Loaded | None:
    """Open a drawing so that all its entities are in the document; None where ezdxf does not take it as it is."""
    data = _bytes_of(path, limits)
    digest = hashlib.sha256(data).hexdigest()
    with suppress(Exception):
        whole = _whole(path, data)
        return Loaded(whole, unit_code(data), recovered=False, conflicts=False, cut_short=False, digest=digest)
    return None


def _whole(path: Path, data: bytes) -> DxfDocument:
    with suppress(Exception):
        return readfile(path)
    return _mended(data)


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


class _Opened(NamedTuple):
    document: DxfDocument
    recovered: bool
    sifted: Sifted = Sifted()
    cut_short: bool = False


def _open(path: Path, data: bytes, *, changed: bool) -> _Opened:
    # ezdxf and what lies under it raise more than DXFError on damaged files (struct, Unicode, index errors):
    # whatever a reader trips over is one damaged file, told to the person below
    if not changed:
        try:
            return _beside(*_decoded(path, data))
        except OddFileError:
            pass
        except Exception:
            with suppress(Exception):
                return _strictly(path)
    with suppress(Exception):
        return _put_right(*_decoded(path, data))
    try:
        return _Opened(_mended(data), recovered=True)
    except Exception as err:
        reason = str(err).splitlines()[0][:160] if str(err) else type(err).__name__
        raise DrawingError(
            f"{path}: not readable as DXF ({reason})", "export the drawing again, as DXF R2000 or later"
        ) from err


def _mended(data: bytes) -> DxfDocument:
    return recover.read(BytesIO(data))[0]


def _strictly(path: Path) -> _Opened:
    return _Opened(readfile(path), recovered=False)


def _decoded(path: Path, data: bytes) -> tuple[str, str]:
    """Return a file's text, its lines ended by line feeds, and the encoding it is in."""
    if data.startswith((BOM_UTF16_LE, BOM_UTF16_BE)):
        encoding, text = "utf-16", data.decode("utf-16", "replace")
    else:
        encoding = _encoding(path)
        text = data.decode(encoding, _BYTES)
    return text.replace("\r\n", "\n").replace("\r", "\n"), encoding


def _encoding(path: Path) -> str:
    try:
        return dxf_file_info(path).encoding
    except Exception:  # its first lines are no tags
        return _USUAL_ENCODING


def _beside(text: str, encoding: str) -> _Opened:
    """Read plain entities ourselves, and let ezdxf read the rest."""
    found = _VERSION.search(text)
    sifted = sift(text, old=found is None or found[1] <= "AC1009")
    if sifted.reordered:
        document = _mended(sifted.rest.text.encode(encoding, _BYTES))
    else:
        document = DxfDocument.load(sifted.rest.compiled)
    return _Opened(document, sifted.reordered, sifted.fitted(document))


def _put_right(text: str, encoding: str) -> _Opened:
    """Read a file whose tags have to be put right first."""
    right = mended(text)
    with suppress(Exception):
        return _beside(right.tags.text, encoding)._replace(recovered=True, cut_short=right.cut_short)
    with suppress(Exception):
        return _Opened(DxfDocument.load(right.tags.compiled), recovered=True, cut_short=right.cut_short)
    return _Opened(_mended(right.tags.text.encode(encoding, _BYTES)), recovered=True, cut_short=right.cut_short)
