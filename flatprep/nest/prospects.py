"""Tell early which tries to untangle a layout will fail: those that others were ahead of after as many positions."""

from collections import deque

from flatprep.nest.shelf import Shelf

# After so many positions a try is judged; it goes on while its loss is among the least of so many, of the last ones.
CHECKS = (20_000, 60_000, 200_000)
GOOD_SHARE, LAST_TRIES = 0.4, 40
# Tries are not judged before so many different layouts are kept: what is kept comes from tries that ran to their end.
FEWEST_KEPT = 4


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
