"""Compare: two revisions of a drawing held against each other."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from pathlib import Path

from flatprep.api.given_up import given_up
from flatprep.base.errors import DrawingError, FlatprepError
from flatprep.base.workers import Caps, Lost, Pool
from flatprep.compare.compare import compare
from flatprep.compare.values import Comparison
from flatprep.drawing.read import ReadOptions, read
from flatprep.model.drawing import Role

_SECONDS = 60.0
_SECONDS_A_MEGABYTE = 90.0


@dataclass(frozen=True, slots=True)
class Revisions:
    """Two drawings, and what the user says about both.

    Attributes
    ----------
    old, new : Path
    units, new_units : str or None
        Of the old and of the new drawing, before their headers; `new_units` is `units` where it is None.
    roles : mapping
        Layer name -> role, of both.
    """

    old: Path
    new: Path
    units: str | None = None
    new_units: str | None = None
    roles: Mapping[str, Role] = field(default_factory=dict)


def compare_files(ask: Revisions) -> Comparison:
    """Read two drawings and compare them, in a process that can be stopped.

    Raises
    ------
    DrawingError
        When a drawing cannot be read, holds no part, or takes too long.
    """
    (answer,) = Pool(_compared, Caps(_patience), 1).run([ask])
    if isinstance(answer, Lost):
        raise given_up(ask.new, answer)
    if isinstance(answer, FlatprepError):
        raise answer
    return answer


def _compared(ask: Revisions) -> Comparison | FlatprepError:
    drawings = []
    try:
        for path, units in ((ask.old, ask.units), (ask.new, ask.new_units or ask.units)):
            drawing = read(path, ReadOptions(units, ask.roles))
            if not drawing.parts:
                raise DrawingError(f"{path}: holds no closed outline", "check it with lint, or mend it with repair")
            drawings.append(drawing)
    except FlatprepError as err:
        return err
    return compare(*drawings)


def _patience(ask: Revisions) -> float:
    size = 0
    for path in (ask.old, ask.new):
        try:
            size += path.stat().st_size
        except OSError:
            continue
    return _SECONDS + _SECONDS_A_MEGABYTE * size / 1e6
