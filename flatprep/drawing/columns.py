"""Tags of entities that are made up alike, column by column."""

from collections.abc import Iterator, Sequence

from flatprep.drawing.entities import flat

Codes = tuple[int, ...]
CLASS, GROUP = 100, 102
X_CODES = frozenset({10, 11, 12, 13, 210})
"""Codes of the x of a point; y and z have codes 10 and 20 higher."""


class NotPlainError(Exception):
    """A code or a value that is left to ezdxf."""


class Columns:
    """Values of entities that have the same codes.

    Parameters
    ----------
    codes
        Group codes of each, the leading 0 included.
    starts
        Where each begins in `values`.
    values
        All values of the file.
    """

    def __init__(self, codes: Codes, starts: Sequence[int], values: Sequence[str]) -> None:
        self.starts, self.values, self._drawn = starts, values, codes
        self.codes = self._masked(codes)
        self._at = {code: k for k, code in enumerate(self.codes)}
        self._numbers: dict[int, list[float]] = {}

    def __len__(self) -> int:
        return len(self.starts)

    def __contains__(self, code: int) -> bool:
        return code in self._at

    def part(self, first: int, last: int) -> "Columns":
        """Return the columns `first` to `last`."""
        return Columns(self._drawn[first:last], [start + first for start in self.starts], self.values)

    def column(self, at: int) -> list[str]:
        """Values at a place."""
        values = self.values
        return [values[start + at] for start in self.starts]

    def texts(self, code: int, default: str) -> list[str]:
        """Values of a code as they stand."""
        return self.column(self._at[code]) if code in self._at else [default] * len(self)

    def numbers(self, code: int, default: float = 0.0) -> list[float]:
        """Values of a code as numbers; ValueError where one is none."""
        return self._number(self._at[code]) if code in self._at else [default] * len(self)

    def every(self, code: int) -> list[list[float]]:
        """Values of each occurrence of a code as numbers, one list an occurrence."""
        return [self._number(k) for k, c in enumerate(self.codes) if c == code]

    def _number(self, at: int) -> list[float]:
        if at not in self._numbers:
            self._numbers[at] = list(map(float, self.column(at)))
        return self._numbers[at]

    def points(self, code: int) -> Iterator[tuple[float, float, float]]:
        """Return the point of each entity whose x has this code."""
        return zip(*(self.numbers(code + more) for more in (0, 10, 20)), strict=True)

    def flips(self) -> list[float]:
        """Which way the plane of each looks; see `flatprep.drawing.entities.flat`."""
        return list(map(flat, self.points(210))) if 210 in self else [1.0] * len(self)

    def _masked(self, codes: Codes) -> Codes:
        """Take what stands in groups of other programs for the marks of the groups."""
        marks = [k for k, code in enumerate(codes) if code == GROUP]
        out = list(codes)
        for first, last in zip(marks[0::2], marks[1::2], strict=True):
            if not (all(v.startswith("{") for v in self.column(first)) and set(self.column(last)) == {"}"}):
                raise NotPlainError
            out[first : last + 1] = [GROUP] * (last + 1 - first)
        return tuple(out)


def in_order(codes: Codes) -> bool:
    """Whether the coordinates of every point follow each other: x, y, and z where there is one."""
    return all(
        (code not in X_CODES or codes[k + 1 : k + 2] == (code + 10,))
        and (code - 10 not in X_CODES or codes[k - 1] == code - 10)
        and (code - 20 not in X_CODES or codes[k - 2] == code - 20)
        for k, code in enumerate(codes)
    )
