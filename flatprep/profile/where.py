"""Where profiles are: the user's own folders first, then those that come with flatprep."""

from collections.abc import Sequence
from pathlib import Path

from flatprep.base.errors import ProfileError

_PACKAGE = Path(__file__).resolve().parent.parent
KINDS = ("processes", "materials", "hardware")


def _shipped() -> Path:
    carried = _PACKAGE / "_profiles"
    return carried if carried.is_dir() else _PACKAGE.parent / "profiles"


SHIPPED = _shipped()
"""Folder that holds ``processes/``, ``materials/`` and ``hardware/``: inside the wheel, or beside the package."""


def places(kind: str, own: Sequence[Path] = ()) -> tuple[Path, ...]:
    """Return the folders that may hold profiles of a kind, first come first served.

    An own folder may have a subfolder of the kind's name, or hold the files itself.

    Raises
    ------
    ProfileError
        When an own folder is not there.
    """
    for root in own:
        if not root.is_dir():
            raise ProfileError(f"{root}: no such folder of profiles", "check the path given with --profiles")
    return tuple(folder for root in own for folder in (root / kind, root)) + (SHIPPED / kind,)


def candidate(kind: str, name: str, own: Sequence[Path] = ()) -> Path | None:
    """Return the file of the profile `name` of a kind, or None; `name` must be a bare file stem."""
    if not name or Path(name).name != name or name.startswith("."):
        return None
    files = (folder / f"{name}.toml" for folder in places(kind, own))
    return next((file for file in files if file.is_file()), None)


def ids(kind: str, own: Sequence[Path] = ()) -> tuple[str, ...]:
    """Return the ids of all shipped profiles of a kind and of those in own subfolders of that kind, sorted."""
    folders = [root / kind for root in own] + [SHIPPED / kind]
    return tuple(sorted({file.stem for folder in folders if folder.is_dir() for file in folder.glob("*.toml")}))
