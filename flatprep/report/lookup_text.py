"""An answer from the tables for people: one value a line, the source below."""

from flatprep.practice.lookup import LookupAnswer
from flatprep.practice.question import Value
from flatprep.report.figures import number

_UNITS = {"_mm2": "mm²", "_mm": "mm", "_um": "µm", "_deg": "°"}
_DECIMALS = {"mm": 3, "µm": 1, "mm²": 1, "°": 1, "": 4}


def lookup_text(answer: LookupAnswer, units: str = "mm") -> str:
    """Return the lines of ``lookup``; lengths to 0.001 mm, or to 0.0001 in beside them for inch users."""
    lines = [f"{answer.kind} {answer.title}"]
    rows = [(_words(key), _shown(key, value, units)) for key, value in answer.values.items() if value is not None]
    width = max((len(words) for words, _ in rows), default=0)
    lines += [f"  {words:<{width}}  {shown}" for words, shown in rows]
    lines.append(f"source: {answer.source}")
    return "\n".join(lines) + "\n"


def _words(key: str) -> str:
    for ending in _UNITS:
        key = key.removesuffix(ending)
    return key.replace("_", " ")


def _shown(key: str, value: Value, units: str) -> str:
    if not isinstance(value, float | int):
        return str(value)
    unit = next((sign for ending, sign in _UNITS.items() if key.endswith(ending)), "")
    text = number(value, _DECIMALS[unit]) + (f" {unit}" if unit not in ("", "°") else unit)
    if unit == "mm" and units in ("in", "ft"):
        text += f"  ({number(value / 25.4, 4)} in)"
    return text
