"""Damage done to drawings, and the check that no file was left half written."""

import json
from pathlib import Path
from random import Random

NUMBERS = (b"1e300", b"-1e300", b"nan", b"inf", b"-inf", b"0", b"-0.0", b"1e-300", b"", b"9" * 400, b"1,5", b"0x10",
           b"2147483648", b"-2147483649", b"1e15", b"-7")  # fmt: skip
WORDS = (b"<script>document.title='ran'</script>", b"../../../../tmp/noticed", b"%s%n%d{0}{x}", b"\x00",
         b"\xff\xfe\x80",
         b"\\U+202E\\U+0000", b"^J^M", b"=1+1", b"{\\fArial|b0;", b"*" * 5000)  # fmt: skip
KINDS = (b"LINE", b"ARC", b"CIRCLE", b"ELLIPSE", b"SPLINE", b"LWPOLYLINE", b"POLYLINE", b"VERTEX", b"INSERT", b"TEXT",
         b"MTEXT", b"HATCH", b"ENDSEC", b"SECTION", b"EOF", b"ENDBLK", b"SEQEND", b"TABLE", b"MESH")  # fmt: skip
CODES = (b"0", b"2", b"5", b"8", b"10", b"20", b"30", b"40", b"41", b"42", b"50", b"51", b"70", b"71", b"90", b"210",
         b"230", b"330", b"999", b"1071", b"-5", b"x")  # fmt: skip
ENDS = {".json": "}", ".dxf": "EOF", ".svg": "</svg>", ".html": "</html>"}


def damaged(data: bytes, rng: Random) -> bytes:
    """One to a dozen faults in a DXF text: in its pairs of code and value, or in its bytes."""
    for _ in range(rng.choice((1, 1, 2, 3, 12))):
        data = rng.choice(_WAYS)(data, rng)
    return data


def _value(data: bytes, rng: Random) -> bytes:
    lines = data.split(b"\n")
    at = _even(lines, rng) + 1
    if at < len(lines):
        lines[at] = rng.choice(rng.choice((NUMBERS, NUMBERS, WORDS, KINDS)))
    return b"\n".join(lines)


def _one_number(data: bytes, rng: Random) -> bytes:
    """Another value under a code that holds a number."""
    lines = data.split(b"\n")
    places = [k for k in range(0, len(lines) - 1, 2) if lines[k].strip() in CODES[4:20]]
    for k in rng.sample(places, min(len(places), rng.choice((1, 1, 3, 40)))):
        lines[k + 1] = rng.choice(NUMBERS)
    return b"\n".join(lines)


def _code(data: bytes, rng: Random) -> bytes:
    lines = data.split(b"\n")
    lines[_even(lines, rng)] = rng.choice(CODES)
    return b"\n".join(lines)


def _kind(data: bytes, rng: Random) -> bytes:
    """An entity of another kind, with the codes it had."""
    old, new = rng.choice(KINDS), rng.choice(KINDS)
    return data.replace(b"\n" + old + b"\n", b"\n" + new + b"\n", rng.choice((1, 1, 5, 10**6)))


def _lose(data: bytes, rng: Random) -> bytes:
    lines = data.split(b"\n")
    at = rng.randrange(len(lines))
    return b"\n".join(lines[:at] + lines[at + rng.choice((1, 2, 4, 20, 400)) :])


def _repeat(data: bytes, rng: Random) -> bytes:
    lines = data.split(b"\n")
    at, size = _even(lines, rng), rng.choice((2, 20, 200))
    return b"\n".join(lines[:at] + lines[at : at + size] * rng.choice((2, 5, 60)) + lines[at:])


def _swap(data: bytes, rng: Random) -> bytes:
    lines = data.split(b"\n")
    a, b, size = _even(lines, rng), _even(lines, rng), rng.choice((1, 2, 12))
    lines[a : a + size], lines[b : b + size] = lines[b : b + size], lines[a : a + size]
    return b"\n".join(lines)


def _cut_off(data: bytes, rng: Random) -> bytes:
    return data[: rng.randrange(len(data) + 1)]


def _bytes(data: bytes, rng: Random) -> bytes:
    raw = bytearray(data)
    for _ in range(min(len(raw), rng.choice((1, 5, 100)))):
        raw[rng.randrange(len(raw))] = rng.randrange(256)
    return bytes(raw)


def _junk(data: bytes, rng: Random) -> bytes:
    at = rng.randrange(len(data) + 1)
    return data[:at] + rng.randbytes(rng.choice((1, 30, 3000))) + data[at:]


def _even(lines: list[bytes], rng: Random) -> int:
    """A line that holds a code, in a file without faults."""
    return rng.randrange((len(lines) + 1) // 2) * 2


_WAYS = (_value, _one_number, _one_number, _code, _kind, _lose, _repeat, _swap, _cut_off, _bytes, _junk)


def half_written(folder: Path) -> list[str]:
    """Files that do not end as their kind must, and pieces of files that were being written."""
    bad = []
    for path in sorted(folder.rglob("*")):
        if path.name.endswith(".part"):
            bad.append(f"{path}: left over")
        elif path.is_file() and path.suffix in ENDS and not path.name.startswith(".") and not _whole(path):
            bad.append(f"{path}: half written")
    return bad


def _whole(path: Path) -> bool:
    text = path.read_text(encoding="utf-8").rstrip()
    if path.suffix == ".json":
        try:
            json.loads(text)
        except ValueError:
            return False
    return text.endswith(ENDS[path.suffix])
