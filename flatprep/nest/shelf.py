"""Failed layouts to start from again, and which of the tries that start from them are worth going on with."""

from bisect import insort
from collections import deque
from collections.abc import Iterator

import numpy as np

from flatprep.nest.engine import Spots

MOST_KEPT = 40
# Layouts whose losses differ by no more than this share are one: a try that fell back to where it came from.
SAME_LOSS = 1e-3
# How far down the shelf to reach: standard deviation of the number of layouts that are passed over. Of 101 tries that
# won, 70 came from the top of the shelf, 18 from the next one.
REACH = 1.5
# After so many positions a try is judged; it goes on while its loss is among the least of so many, of the last ones.
CHECKS = (20_000, 60_000, 200_000)
GOOD_SHARE, LAST_TRIES = 0.4, 40
# Tries are not judged before so many different layouts are kept: what is kept comes from tries that ran to their end.
FEWEST_KEPT = 4


class Shelf:
    """Layouts of one length that could not be untangled, least loss first, no two of them the same."""

    def __init__(self) -> None:
        self._kept: list[Spots] = []

    def __len__(self) -> int:
        return len(self._kept)

    def __iter__(self) -> Iterator[Spots]:
        return iter(self._kept)

    def holds(self, loss: float) -> bool:
        """Tell whether a layout of this loss (mm²) is kept."""
        return any(abs(spots.loss - loss) <= SAME_LOSS * spots.loss for spots in self._kept)

    def add(self, spots: Spots) -> None:
        """Keep a layout, unless it is there; of too many the one of most loss goes."""
        if not self.holds(spots.loss):
            insort(self._kept, spots, key=lambda s: s.loss)
            del self._kept[MOST_KEPT:]

    def pick(self, rng: np.random.Generator) -> Spots:
        """Return a layout, mostly one of the first three."""
        return self._kept[min(int(abs(rng.normal(0.0, REACH))), len(self._kept) - 1)]


class Prospects:
    """Judge of the tries that start from a shelf, by what others had reached after as many positions.

    Of tries that win in the end two in three are by then among the best third of all; what is saved on the others
    pays for several times as many.
    """

    def __init__(self) -> None:
        self._seen: list[deque[float]] = [deque(maxlen=LAST_TRIES) for _ in CHECKS]
        self._shelf = Shelf()
        self._next = 0
        self.given_up = False

    def begin(self, shelf: Shelf) -> None:
        """Note that a try begins; the shelf is the one it comes from."""
        self._shelf, self._next, self.given_up = shelf, 0, False

    def go_on(self, tried: int, loss: float) -> bool:
        """Tell whether a try is worth going on with that has least loss (mm²) after so many positions."""
        if len(self._shelf) < FEWEST_KEPT:
            return True
        while self._next < len(CHECKS) and tried >= CHECKS[self._next] and not self.given_up:
            self.given_up = self._shelf.holds(loss) or not self._is_good(self._seen[self._next], loss)
            self._next += 1
        return not self.given_up

    @staticmethod
    def _is_good(seen: deque[float], loss: float) -> bool:
        """Compare a loss with those seen, and add it to them."""
        better = sum(other <= loss for other in seen)
        good = better <= GOOD_SHARE * len(seen)
        seen.append(loss)
        return good
