"""Texts of drawings brought into plain words: control codes, symbols and spellings of the trade."""

import re
import unicodedata

_CODES = (
    (r"%%[cC]", " Ø"), (r"%%[dD]", "°"), (r"%%[pP]", "±"), (r"%%[uUoOkK]", ""),
    (r"\\U\+2205|\\U\+00D8|\\U\+2300", " Ø"), (r"\\U\+00B0", "°"), (r"\\U\+00B1", "±"),
    (r"\\[PN~]", " "), (r"\\[ACFHQTWacfhqtw][^;\\]*;", ""), (r"\\S([^;^#/]*)[\^#/]([^;]*);", r" \1/\2 "),
    (r"\\[LOKlok]", ""), (r"[{}]", ""),
)  # fmt: skip
"""What a text may still carry of the file format."""

_SYMBOLS = str.maketrans({
    "ø": "Ø", "⌀": "Ø", "∅": "Ø", "Φ": "Ø", "φ": "Ø", "×": "x", "✕": "x", "↧": " DEPTH ", "⌵": " CSK ", "⌴": " CBORE ",
    "″": '"', "”": '"', "“": '"', "’": "'", "‘": "'", "º": "°", "–": "-", "—": "-", "−": "-", "‐": "-", "\n": " ",
    "\t": " ", "\r": " ",
})  # fmt: skip

_SPELLINGS = (
    (r"C['. /]?SINK|C['. /]?SUNK|C['/]?SK|COUNTER[- ]?SINK|COUNTER[- ]?SUNK|\bCS\b(?=\s*[ØM#\d])", "CSK"),
    (r"C['. /]?BORED?|COUNTER[- ]?BORED?", "CBORE"),
    (r"\bTHROUGH\b|\bTHRO\b|\bTHR\b\.?", "THRU"), (r"\bDIAMETER\b|\bDIAM\b\.?|\bDIA\b\.?", " Ø "),
    (r"\bDEGREES?\b|\bDEGS?\b\.?", "°"), (r"\bTHREAD(?:ED)?\b|\bTAPPED\b|\bTAPPING\b|\bTHD\b\.?", "TAP"),
    (r"\bDRILLED\b", "DRILL"), (r"\bREAMED\b", "REAM"), (r"\bBORED\b", "BORE"), (r"\bDP\b\.?", "DEEP"),
    (r"\bTYPICAL\b", "TYP"), (r"\bINCH(?:ES)?\b|(?<=\d)\s*IN\b\.?(?!\s*\d)", '"'),
)  # fmt: skip


def plain_callout(text: str) -> str:
    """Return a drawing's text with its symbols as words, upper case but for tolerance letters, single spaces."""
    for pattern, word in _CODES:
        text = re.sub(pattern, word, text)
    flat = unicodedata.normalize("NFC", text).translate(_SYMBOLS)
    flat = re.sub(r"(?<=\d),(?=\d)", ".", flat)
    for pattern, word in _SPELLINGS:
        flat = re.sub(pattern, word, flat, flags=re.IGNORECASE)
    return " ".join(flat.split()).strip(" .;")
