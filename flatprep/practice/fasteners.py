"""Fasteners as a job names them: bolts, socket and countersunk screws, shoulder screws, dowel pins."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from enum import StrEnum
from pathlib import Path

from flatprep.profile.hardware.heads import find_counterbore, find_countersink, names_head
from flatprep.profile.hardware.names import UnknownHardwareError, inch_size, tidy
from flatprep.profile.hardware.nuts import find_nut
from flatprep.profile.hardware.pins import Pin, ShoulderScrew, find_pin, find_shoulder_screw
from flatprep.profile.hardware.table import table
from flatprep.profile.hardware.threads import Thread, find_thread

INCH_SOCKET_HEAD = 1.5
"""Head over thread diameter of an inch socket head screw: ASME B18.3, from memory."""
_SOCKET = re.compile(r"ISO[\s-]*4762|DIN[\s-]*912|\bsocket\b|\bSHCS\b|\bcap\b", re.IGNORECASE)
_HEX = re.compile(r"ISO[\s-]*40(?:14|17)|DIN[\s-]*93[13]|ISO[\s-]*4016|\bhex\b|\bhexagon\b", re.IGNORECASE)
_NOISE = re.compile(r"\b(?:bolt|screw|head|machine|countersunk|flat)\b", re.IGNORECASE)


class FastenerKind(StrEnum):
    """What a fastener is."""

    HEX = "hex bolt"
    SOCKET = "socket head screw"
    SUNK = "countersunk screw"
    SHOULDER = "shoulder screw"
    DOWEL = "dowel pin"


@dataclass(frozen=True, slots=True)
class Fastener:
    """A fastener.

    Attributes
    ----------
    title : str
        As it is asked for at the counter, without its length.
    thread : Thread or None
        None for a dowel.
    head_dia_mm : float
        Greatest width of the head: across corners, outside, or the sink's; 0 for a dowel.
    """

    kind: FastenerKind
    title: str
    thread: Thread | None
    head_dia_mm: float = 0.0
    shoulder: ShoulderScrew | None = None
    pin: Pin | None = None

    @property
    def is_inch(self) -> bool:
        """Whether it is sold by the inch."""
        return self.thread is not None and self.thread.is_inch


def find_fastener(text: str, own: Sequence[Path] = ()) -> Fastener:
    """Read ``M6 ISO 4762``, ``M5 ISO 10642``, ``M12 hex``, ``3/8-16``, ``shoulder 1/4``, ``6 dowel``.

    A bare screw size is a hex bolt; an inch size without threads is UNC.

    Raises
    ------
    UnknownHardwareError
        With the nearest known names.
    """
    flat = tidy(text)
    if re.search(r"shoulder", flat, re.IGNORECASE):
        return _shoulder(text, own)
    if re.search(r"dowel|\bpin\b|ISO[\s-]*(?:2338|8734)", flat, re.IGNORECASE):
        pin = find_pin(text, own)
        return Fastener(
            FastenerKind.DOWEL, f"dowel pin {pin.diameter_mm:g} {pin.pin_class} {pin.standard}", None, pin=pin
        )
    if not names_head(flat, own) and not re.search(r"countersunk", flat, re.IGNORECASE):
        return _headed(text, flat, own)
    sink = find_countersink(flat, own)
    thread = find_thread(_coarse(sink.screw), own)
    return Fastener(FastenerKind.SUNK, f"countersunk screw {sink.name}", thread, sink.sink_dia_mm)


def _shoulder(text: str, own: Sequence[Path]) -> Fastener:
    screw = find_shoulder_screw(re.sub(r"\bscrew\b", " ", text, flags=re.IGNORECASE), own)
    return Fastener(
        FastenerKind.SHOULDER,
        f"shoulder screw {screw.name}",
        find_thread(screw.thread, own),
        screw.head_dia_mm,
        shoulder=screw,
    )


def _headed(text: str, flat: str, own: Sequence[Path]) -> Fastener:
    bare = _NOISE.sub(" ", _HEX.sub(" ", _SOCKET.sub(" ", flat))).strip()
    try:
        thread = find_thread(_coarse(bare), own)
    except UnknownHardwareError as err:
        raise UnknownHardwareError(f'fastener "{text}" is not known', err.remedy) from None
    if _SOCKET.search(flat):
        return Fastener(FastenerKind.SOCKET, f"socket head screw {thread.name}", thread, _socket_head_mm(thread, own))
    return Fastener(FastenerKind.HEX, f"hex bolt {thread.name}", thread, find_nut(thread.screw, own).corners_mm)


def _coarse(size: str) -> str:
    return f"{size} UNC" if inch_size(size) else size


def _socket_head_mm(thread: Thread, own: Sequence[Path]) -> float:
    return INCH_SOCKET_HEAD * thread.major_mm if thread.is_inch else find_counterbore(thread.screw, own).head_dia_mm


def lengths_mm(fastener: Fastener, own: Sequence[Path] = ()) -> tuple[float, ...]:
    """Return the lengths that a fastener is sold in, mm; of a shoulder screw the lengths of the shoulder."""
    inch = fastener.shoulder.is_inch if fastener.shoulder else fastener.is_inch
    kind = {FastenerKind.SHOULDER: "shoulder", FastenerKind.DOWEL: "pin"}.get(fastener.kind, "")
    unit, scale = ("in", 25.4) if inch else ("mm", 1.0)
    for row in table("lengths", own).rows:
        row.only(("unit", "kind", "length", "from"))
        if (row.text("unit"), row.text("kind", "")) == (unit, kind):
            return tuple(scale * length for length in row.numbers("length"))
    return ()
