"""Which files a job may read: a job comes by mail, so it reads no further than its own surroundings."""

from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path

from flatprep.base.names import did_you_mean
from flatprep.profile.toml_check import Table

ANYWHERE = "--anywhere"
"""The flag of the command line that lets a job read files from everywhere."""


@dataclass(frozen=True, slots=True)
class Reach:
    """What a job in `folder` may read: what lies under that folder or beside it, or all with `anywhere`."""

    folder: Path
    anywhere: bool = False

    def file(self, table: Table, key: str, text: str) -> Path:
        """Return the file that `text` names, seen from the job's folder.

        Raises
        ------
        FlatprepError
            Of the table's class: when it is not there, is no file, or lies out of reach.
        """
        with _told(table, key, text):
            path = self._within(table, key, text)
            if not path.is_file():
                raise table.error(f'{table.place}: {key} = "{text}": no such file', self._hint(path))
        return path

    def directory(self, table: Table, key: str, text: str) -> Path:
        """Return the folder that `text` names, seen from the job's folder.

        Raises
        ------
        FlatprepError
            Of the table's class: when it is not there, is no folder, or lies out of reach.
        """
        with _told(table, key, text):
            path = self._within(table, key, text)
            if not path.is_dir():
                raise table.error(f'{table.place}: {key} = "{text}": no such folder', "make it, or check the path")
        return path

    def _within(self, table: Table, key: str, text: str) -> Path:
        path = self.folder / text
        if not self.anywhere and not self._near(path):
            raise table.error(
                f'{table.place}: {key} = "{text}": lies neither under the job\'s folder nor beside it',
                f"copy it there, or allow it with {ANYWHERE}",
            )
        return path

    def _near(self, path: Path) -> bool:
        home, target = self.folder.resolve(), path.resolve()
        around = home.parent if home.parent != Path(home.anchor) else home
        return target.is_relative_to(around)

    def _hint(self, path: Path) -> str:
        folder = path.parent
        if not folder.is_dir():
            return f"there is no folder {folder}"
        names = sorted(file.name for file in folder.iterdir() if file.suffix == path.suffix)
        return did_you_mean(path.name, names) if names else f"{folder} holds no {path.suffix or 'such'} file"


@contextmanager
def _told(table: Table, key: str, text: str) -> Iterator[None]:
    try:
        yield
    except (OSError, ValueError, RuntimeError) as err:  # a name too long, a NUL in it, links in a ring
        reason = getattr(err, "strerror", None) or "cannot be a file's name"
        raise table.error(f"{table.place}: {key}: {text[:60]!r}: {reason}", "check the path") from None
