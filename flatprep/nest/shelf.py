"""Failed layouts to start from again."""

from bisect import insort

import numpy as np

from flatprep.nest.engine import Spots

MOST_KEPT = 40
# Layouts whose losses differ by no more than this share are one: a try that fell back to where it came from.
SAME_LOSS = 1e-3
# How far down the shelf to reach: standard deviation of the number of layouts that are passed over. Of 101 tries that
# won, 70 came from the top of the shelf, 18 from the next one.
REACH = 1.5


class Shelf:
    """Layouts of one length that could not be untangled, least loss first, no two of them the same."""

    def __init__(self) -> None:
        self._kept: list[Spots] = []

    def __len__(self) -> int:
        return len(self._kept)

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
