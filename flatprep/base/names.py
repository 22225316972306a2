"""Names as people write them: compared without case, spaces and hyphens; the nearest known ones for an unknown."""

import difflib
import unicodedata
from collections.abc import Iterable

_IGNORED = str.maketrans("", "", " -_./")


def plain(text: str) -> str:
    """Return `text` as names are compared: ``EN AW-5052`` and ``en_aw 5052`` are both ``enaw5052``."""
    return unicodedata.normalize("NFKC", text).casefold().translate(_IGNORED)


def nearest(word: str, known: Iterable[str], count: int = 3) -> tuple[str, ...]:
    """Return up to `count` known names that `word` may have been meant to be, likeliest first."""
    by_plain: dict[str, str] = {}
    for name in known:
        by_plain.setdefault(plain(name), name)
    asked = plain(word)
    close = difflib.get_close_matches(asked, by_plain, n=count, cutoff=0.6)
    holding = [p for p in sorted(by_plain) if asked and asked in p and p not in close]
    return tuple(by_plain[p] for p in [*close, *holding][:count])


def did_you_mean(word: str, known: Iterable[str]) -> str:
    """Return a remedy: the nearest known names, else the known ones (the first dozen)."""
    names = list(known)
    close = nearest(word, names)
    if close:
        return "did you mean " + " or ".join(f'"{name}"' for name in close) + "?"
    shown = ", ".join(sorted(names)[:12]) + (", ..." if len(names) > 12 else "")
    return f"known: {shown}" if names else "none is known"
