"""What is written on a remnant's drawing: its material, thickness and the label on the piece, as lines of text.

The same lines are written and read: ``material: mild-steel``, ``thickness: 4 mm``, ``label: R0007``, ``grain: length``,
``price: 12.50``. Whatever else stands on a drawing is for people.
"""

import re
from collections.abc import Iterable
from dataclasses import dataclass

from flatprep.base.errors import DrawingError
from flatprep.model.drawing import Text

KEYS = ("material", "thickness", "label", "grain", "price")
"""Words that a line may begin with."""
_LINE = re.compile(rf"\s*({'|'.join(KEYS)})\s*[:=]\s*(\S.*?)\s*", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class RemnantLabel:
    """What the lines say, each as written; None where there is no such line."""

    material: str | None = None
    thickness: str | None = None
    label: str | None = None
    grain: str | None = None
    price: str | None = None


def read_label(file: str, texts: Iterable[Text]) -> RemnantLabel:
    """Read the lines of a drawing's texts.

    Raises
    ------
    DrawingError
        When two lines say different things of the same.
    """
    said: dict[str, str] = {}
    for line in (line for text in texts for line in text.text.splitlines()):
        found = _LINE.fullmatch(line)
        if found is None:
            continue
        key, value = found[1].lower(), found[2]
        if said.setdefault(key, value) != value:
            raise DrawingError(
                f'{file}: its texts say both "{key}: {said[key]}" and "{key}: {value}"', "leave one of them"
            )
    return RemnantLabel(**said)


def label_lines(label: RemnantLabel) -> tuple[str, ...]:
    """Return the lines to be written on a remnant's drawing."""
    values = ((key, getattr(label, key)) for key in KEYS)
    return tuple(f"{key}: {value}" for key, value in values if value)


def thickness_text(thickness_mm: float) -> str:
    """Return a thickness as it is written on a remnant: nothing of it is lost by rounding."""
    return f"{thickness_mm:.9g} mm"
