"""Names as people write them: compared without case, spaces and hyphens; the nearest known ones for an unknown."""

import difflib
import unicodedata
from collections.abc import Iterable

_UNSEEN = {"Cc", "Cs", "Zl", "Zp"}
"""Unicode categories: control characters, halves of characters, line and paragraph separators."""
_TURNING = frozenset("\u202a\u202b\u202c\u202d\u202e\u2066\u2067\u2068\u2069")
"""Characters that turn the direction of what follows: a name can look like another with them."""
_IGNORED = str.maketrans("", "", " -_./")


def printable(text: str) -> str:
    """Return a text as people can see it: what no page, terminal or XML may hold becomes U+FFFD.

    Names and texts come from other people's drawings and jobs. Line ends and tabs stay.
    """
    if text.isascii() and text.isprintable():
        return text
    return "".join("\ufffd" if _is_unseen(c) else c for c in text)


def one_line(text: str) -> str:
    """Return a name as people can see it, on one line."""
    return printable(text.replace("\r", " ").replace("\n", " ").replace("\t", " "))


def _is_unseen(char: str) -> bool:
    return char not in "\n\t" and (unicodedata.category(char) in _UNSEEN or char in _TURNING)


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


def did_you_mean(word: str, known: Iterable[str], most: int = 12) -> str:
    """Return a remedy: the nearest known names, else the first known ones, `most` of them."""
    names = list(known)
    close = nearest(word, names)
    if close:
        return "did you mean " + " or ".join(f'"{name}"' for name in close) + "?"
    shown = ", ".join(sorted(names)[:most]) + (", ..." if len(names) > most else "")
    return f"known: {shown}" if names else "none is known"
