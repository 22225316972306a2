"""What a run has written into its folder, as checksums: the next run takes away what it does not write again.

A bench sheet of a part that is no longer in the job would be worked from by mistake. Only files that are still byte
for byte as they were written are taken away; whatever else lies in the folder is somebody's own.
"""

import hashlib
import re
from collections.abc import Iterable, Iterator, Mapping
from contextlib import suppress
from pathlib import Path

MANIFEST = "files.sha256"
"""Written as ``sha256sum -c`` reads it."""
Files = Iterable[tuple[Path, str | bytes | None]]


def with_manifest(folder: Path, files: Files) -> Iterator[tuple[Path, str | bytes | None]]:
    """Yield the files for `write_together`, then what an earlier run left and is to go, then the new list.

    Parameters
    ----------
    folder
        All files lie under it.
    files
        Paths and what they are to hold; None where an older one is to go.
    """
    written: dict[str, str] = {}
    for path, data in files:
        if data is not None:
            written[path.relative_to(folder).as_posix()] = _digest(data if isinstance(data, bytes) else _bytes(data))
        yield path, data
    for name, digest in _earlier(folder).items():
        if name not in written and _is_as_written(folder, name, digest):
            yield folder / name, None
    yield folder / MANIFEST, "".join(f"{digest}  {name}\n" for name, digest in sorted(written.items()))


def _earlier(folder: Path) -> Mapping[str, str]:
    """Names and digests of what the last run wrote; empty where there is no list, or one that is not ours."""
    with suppress(OSError, ValueError):
        text = (folder / MANIFEST).read_text(encoding="utf-8")
        return {name: digest for digest, name in re.findall(r"^([0-9a-f]{64})  (.+)$", text, re.MULTILINE)}
    return {}


def _is_as_written(folder: Path, name: str, digest: str) -> bool:
    """Tell whether a name is that of a file within the folder which nobody has changed."""
    with suppress(OSError, ValueError):
        path = folder / name
        if path.resolve().is_relative_to(folder.resolve()) and path.is_file() and not path.is_symlink():
            return _digest(path.read_bytes()) == digest
    return False


def _bytes(text: str) -> bytes:
    return text.encode("utf-8", "replace")


def _digest(data: bytes) -> str:
    return hashlib.sha256(data).hexdigest()
