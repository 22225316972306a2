"""Several files of a folder changed so that all of it happens or nothing, even where the process is killed in between.

What is to be done is written down whole first, in one file beside the others; then it is done; then the file goes. A
process that is killed before the file is there has done nothing; what one that is killed later has left undone is
done by the next one that asks.
"""

import json
import os
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from pathlib import Path

from flatprep.base.errors import OutputError
from flatprep.base.files import make_folder, write_whole

NAME = ".flatprep-changes.json"


@dataclass(frozen=True, slots=True)
class Changes:
    """What is to be done in a folder; paths are seen from it, with forward slashes.

    Attributes
    ----------
    write : mapping of str to str
        Texts by path.
    move : sequence of (str, str)
        From where to where, done after the writing.
    """

    write: Mapping[str, str] = field(default_factory=dict)
    move: Sequence[tuple[str, str]] = ()


def change_together(folder: Path, changes: Changes) -> None:
    """Do all the changes or none of them.

    Raises
    ------
    OutputError
        When something cannot be written; what was begun by then is finished by the next `finish`.
    """
    for name in _names(changes):
        make_folder(_inside(folder, name).parent)
    write_whole(folder / NAME, json.dumps({"write": dict(changes.write), "move": [list(m) for m in changes.move]}))
    finish(folder)


def is_unfinished(folder: Path) -> bool:
    """Tell whether changes have been begun and not finished."""
    return (folder / NAME).exists()


def finish(folder: Path) -> bool:
    """Do what is left of changes that were broken off; whether there was anything.

    Raises
    ------
    OutputError
        When they cannot be read or done.
    """
    if not is_unfinished(folder):
        return False
    try:
        changes = _read(folder / NAME)
        for name, text in changes.write.items():
            write_whole(_inside(folder, name), text)
        for source, target in changes.move:
            if _inside(folder, source).exists():
                os.replace(_inside(folder, source), _inside(folder, target))
        (folder / NAME).unlink()
    except OSError as err:
        raise OutputError(
            f"{folder}: a change that was begun cannot be finished ({err.strerror or err})", "make room, then run again"
        ) from err
    return True


def _read(path: Path) -> Changes:
    try:
        data = json.loads(path.read_text(encoding="utf-8"))
        return Changes(dict(data["write"]), tuple((str(a), str(b)) for a, b in data["move"]))
    except (KeyError, TypeError, ValueError) as err:
        raise OutputError(f"{path}: is damaged", "look what was changed by hand, then delete it") from err


def _names(changes: Changes) -> tuple[str, ...]:
    return (*changes.write, *(name for pair in changes.move for name in pair))


def _inside(folder: Path, name: str) -> Path:
    path = folder / name
    if not path.resolve().is_relative_to(folder.resolve()):
        raise OutputError(f"{folder / NAME}: {name} lies outside the folder", "delete that file: it is none of ours")
    return path
