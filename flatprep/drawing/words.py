"""What is written on and under a sheet besides the names of its parts."""

from collections import Counter
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field

from flatprep.model.drawing import Curve
from flatprep.model.layout import SheetLayout

Etched = Mapping[tuple[str, bool], Sequence[Curve]]
"""Lines by the part's name and whether the piece lies mirrored."""


@dataclass(frozen=True, slots=True)
class Words:
    """What is written on and under a sheet.

    Attributes
    ----------
    title : tuple of str
        Lines of their own.
    identity : mapping of str to str
        By part, which revision and content of its drawing is cut: under each label, and in a list of the parts.
    etched : mapping
        Lines to be etched on a part, in its own coordinates.
    """

    title: tuple[str, ...] = ()
    identity: Mapping[str, str] = field(default_factory=dict)
    etched: Etched = field(default_factory=dict)


NO_WORDS = Words()


def identity_lines(sheet: SheetLayout, identity: Mapping[str, str]) -> Iterator[str]:
    """Yield what lies on a sheet: pieces, part, and which drawing it was cut from."""
    for name, count in Counter(p.part for p in sheet.placements).items():
        if name in identity:
            yield f"{count} x {name}  {identity[name]}"
