"""File names out of names that came from drawings and jobs: never a path, on any system."""

import hashlib
import re
import unicodedata
from collections.abc import Sequence

_DEVICES = {"con", "prn", "aux", "nul", *(f"com{n}" for n in range(1, 10)), *(f"lpt{n}" for n in range(1, 10))}
_LONGEST = 80


def safe_stem(name: str) -> str:
    """Return a file stem for a name: letters, digits, ``-_#.`` and nothing that a system takes for something else.

    A name that had to be changed gets six digits of its hash, so that two names never become one file.
    """
    plain = unicodedata.normalize("NFC", name)
    stem = re.sub(r"[^\w#.-]+", "-", plain, flags=re.ASCII).strip("-. ")[:_LONGEST].rstrip("-. ")
    if stem.split(".")[0].lower() in _DEVICES or not stem:
        stem = f"part-{stem}".rstrip("-")
    if stem == name:
        return stem
    return f"{stem}-{hashlib.sha256(plain.encode('utf-8', 'surrogatepass')).hexdigest()[:6]}"


def safe_stems(names: Sequence[str]) -> tuple[str, ...]:
    """Stems of several names, no two alike, also where a system does not tell capitals from small letters."""
    stems: list[str] = []
    taken: set[str] = set()
    for name in names:
        stem = safe_stem(name)
        while stem.lower() in taken:
            stem += "_"
        taken.add(stem.lower())
        stems.append(stem)
    return tuple(stems)
