"""A first job file as TOML text: every guess marked as one, everything unknown named."""

import json
from collections.abc import Sequence
from dataclasses import dataclass

GUESS = "# guess"


@dataclass(frozen=True, slots=True)
class DraftPart:
    """A drawing for the job file.

    Attributes
    ----------
    drawing : str
        Seen from the job file.
    material, thickness : str or None
        None where nobody said it.
    guessed : frozenset of str
        Which of these, and of `quantity`, are guesses.
    name : str or None
        Where the drawing's stem is not its own.
    """

    drawing: str
    material: str | None
    thickness: str | None
    quantity: int
    guessed: frozenset[str]
    name: str | None = None


@dataclass(frozen=True, slots=True)
class DraftStock:
    """Sheets of a material and thickness that some part seems to need; the size is a guess."""

    name: str
    material: str
    thickness: str
    length_mm: int
    width_mm: int


@dataclass(frozen=True, slots=True)
class Draft:
    """A job that is still to be looked through.

    Attributes
    ----------
    cutlist : str or None
        A cut list that stands beside the drawings; its drawings are not among `parts`.
    """

    name: str
    process: str | None
    parts: tuple[DraftPart, ...]
    stock: tuple[DraftStock, ...] = ()
    cutlist: str | None = None


def draft_toml(draft: Draft) -> str:
    """Return the job file; what nobody said stands in it as a comment."""
    return "\n\n".join([_head(draft), *map(_stock, draft.stock), *map(_part, draft.parts)]) + "\n"


def _head(draft: Draft) -> str:
    lines = [
        "# Drafted from the drawings' names. Look through every line marked as a guess.",
        _line("name", draft.name),
        'units = "mm"',
        _line("process", draft.process) if draft.process else '# process = "fibre-laser"   # not said: needed',
        "sets = 1   # machines to build; quantities are for one",
    ]
    if draft.cutlist:
        lines.append(_line("parts", draft.cutlist))
    if not draft.stock:
        lines.append("# no [[stock]] could be drafted: it takes a material and a thickness")
    return "\n".join(lines)


def _stock(stock: DraftStock) -> str:
    return "\n".join(
        [
            "[[stock]]",
            _line("name", stock.name),
            _line("material", stock.material),
            _line("thickness", stock.thickness),
            f"length = {stock.length_mm}   {GUESS}: the size of your sheets",
            f"width = {stock.width_mm}   {GUESS}",
            'count = "any"',
            "# price_per_sheet = 0.00   # without a price there is no cost",
        ]
    )


def _part(part: DraftPart) -> str:
    lines = ["[[part]]", _line("drawing", part.drawing)]
    lines += [_line("name", part.name)] if part.name else []
    lines += [
        _value(part, "material", part.material, '"mild-steel"'),
        _value(part, "thickness", part.thickness, '"3mm"'),
        f"quantity = {part.quantity}   {GUESS}{', from the name' if 'quantity' in part.guessed else ''}",
    ]
    return "\n".join(lines)


def _value(part: DraftPart, key: str, value: str | None, example: str) -> str:
    if value is None:
        return f"# {key} = {example}   # the name does not tell: say it here"
    return _line(key, value) + (f"   {GUESS}, from the name" if key in part.guessed else "")


def _line(key: str, value: str) -> str:
    # a JSON string without escapes beyond ASCII's is a TOML basic string
    return f"{key} = {json.dumps(value, ensure_ascii=False)}"


def stock_name(material: str, thickness: str) -> str:
    """``mild-steel-3mm``."""
    return f"{material}-{thickness}"


def unknown(parts: Sequence[DraftPart]) -> tuple[int, int]:
    """How many parts lack a material, and how many a thickness."""
    return sum(p.material is None for p in parts), sum(p.thickness is None for p in parts)
