"""Text tables with aligned columns."""

from collections.abc import Sequence


def columns(head: Sequence[str], rows: Sequence[Sequence[str]], left: int = 1) -> str:
    """Return rows under a head, the first `left` columns to the left and the others to the right.

    Parameters
    ----------
    head
        Column titles.
    rows
        Cells, as many as titles.
    left
        How many columns hold words.

    Returns
    -------
    str
        Lines without trailing spaces; no line end at the end.
    """
    table = [list(head), *map(list, rows)]
    widths = [max(len(row[i]) for row in table) for i in range(len(head))]
    lines = []
    for row in table:
        cells = [c.ljust(w) if i < left else c.rjust(w) for i, (c, w) in enumerate(zip(row, widths, strict=True))]
        lines.append("  ".join(cells).rstrip())
    return "\n".join(lines)
