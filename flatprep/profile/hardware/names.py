"""Sizes as people write them, brought into one form: ``M8×1,0`` is ``M8x1``, ``No. 10 - 24 UNC`` is ``#10-24 UNC``."""

import re
import unicodedata
from collections.abc import Iterable, Sequence
from fractions import Fraction

from flatprep.base.errors import UsageError
from flatprep.base.names import did_you_mean

_NUMBER_SIZE = re.compile(r"^(?:no\.?\s*|nr\.?\s*|#\s*)(\d{1,2})(?=\D|$)", re.IGNORECASE)
_TIMES = re.compile(r"\s*[x*]\s*", re.IGNORECASE)
_STANDARD = re.compile(
    r"\b(?:DIN|EN|ISO|ASME|ANSI|BS)(?:[\s-]*(?:EN|ISO))*[\s-]*B?\d[\d.-]*(?:/[\d.]+)*", re.IGNORECASE
)
_INCH_MARK = re.compile(r"(?<=\d)\s*(?:\"|''|in\b\.?|inch\b)", re.IGNORECASE)


class UnknownHardwareError(UsageError):
    """A name that no table holds; the remedy lists the nearest known ones."""


def tidy(text: str) -> str:
    """Return a size with one kind of times sign, dash, decimal point and number sign, and single spaces."""
    flat = unicodedata.normalize("NFKC", text).replace("×", "x").replace("⁄", "/").replace("″", '"').replace("”", '"')
    flat = re.sub(r"[‐-―−]", "-", flat)
    flat = re.sub(r"(?<=\d),(?=\d)", ".", flat)
    flat = " ".join(flat.split())
    flat = _NUMBER_SIZE.sub(r"#\1", flat)
    flat = _INCH_MARK.sub("", flat)
    flat = re.sub(r"\s*-\s*(?=[\dA-Za-z])", "-", flat)
    return _mixed(flat.strip())


def _mixed(text: str) -> str:
    """``1 1/4`` and ``1-1/4`` as one size."""
    return re.sub(r"^(\d+)[ -](\d+/\d+)", r"\1-\2", text)


def metric_size(text: str) -> str | None:
    """Return ``M8`` for ``m8``, ``M 8``, ``M8.0``; None where it is no metric screw size."""
    match = re.fullmatch(r"[mM]\s*(\d+(?:\.\d+)?)", tidy(text))
    return f"M{float(match[1]):g}" if match else None


def inch_size(text: str) -> str | None:
    """Return ``#10`` or ``1/4`` for ``No. 10``, ``1/4"``, ``0.25in``; None where it is no inch size."""
    flat = tidy(text)
    if re.fullmatch(r"#\d{1,2}", flat):
        return f"#{int(flat[1:])}"
    match = re.fullmatch(r"(?:(\d+)-)?(\d+)/(\d+)", flat)
    if match and int(match[3]):
        return _fraction(Fraction(int(match[2]), int(match[3])) + int(match[1] or 0))
    if re.fullmatch(r"\d*\.\d+|\d+", flat):
        size = Fraction(flat)
        return _fraction(size) if 0 < size <= 4 and (64 * size).denominator == 1 else None
    return None


def _fraction(size: Fraction) -> str:
    whole, rest = divmod(size, 1)
    if not rest:
        return str(whole)
    return f"{whole}-{rest}" if whole else str(rest)


def screw_size(text: str) -> str | None:
    """Return a metric or inch screw size in one form, or None."""
    return metric_size(text) or inch_size(text)


def screw_in(text: str) -> str | None:
    """Return the screw size that stands in a text among standards, pitches and words, or None."""
    bare = _STANDARD.sub(" ", tidy(text))
    match = re.search(r"(?<![\w.])(?:[mM]\s?\d+(?:\.\d+)?|#\d{1,2}|\d+-\d+/\d+|\d+/\d+|\d?\.\d+)(?![\d/])", bare)
    return screw_size(match[0]) if match else screw_size(bare)


def inches(size: str) -> float:
    """Return the inches of a fraction such as ``1-1/4`` or ``3/8``."""
    whole, _, rest = size.rpartition("-")
    return float(Fraction(rest) + int(whole or 0))


def unknown(kind: str, asked: str, known: Iterable[str], hint: str = "") -> UnknownHardwareError:
    """Return (not raise) the error for a name that no table holds, with the nearest known ones."""
    names = list(known)
    close = _near_in_size(asked, names)
    remedy = "nearest known: " + ", ".join(close) if close else did_you_mean(asked, names)
    return UnknownHardwareError(f'{kind} "{asked}" is not known', f"{hint}; {remedy}" if hint else remedy)


def _near_in_size(asked: str, known: Sequence[str], count: int = 4) -> list[str]:
    """Return the names of the same kind (``M``, ``#``, plain number) whose size is nearest, nearest first."""
    wanted = _kind_and_size(tidy(asked))
    if wanted is None:
        return []
    sized = [(name, _kind_and_size(name)) for name in known]
    same = [(abs(at[1] - wanted[1]), name) for name, at in sized if at is not None and at[0] == wanted[0]]
    return [name for _, name in sorted(same, key=lambda pair: pair[0])[:count]]


def _kind_and_size(name: str) -> tuple[str, float] | None:
    match = re.match(r"([A-Za-z#]{0,2})\s*(\d+-\d+/\d+|\d+/\d+|\d+(?:\.\d+)?)", name)
    if match is None or match[2].endswith("/0"):
        return None
    is_inch = "/" in match[2]
    return match[1].upper() or ("in" if is_inch else ""), inches(match[2]) if is_inch else float(match[2])
