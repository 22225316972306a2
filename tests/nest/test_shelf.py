"""Failed layouts that are kept."""

import numpy as np
import pytest

from flatprep.nest.engine import Spots
from flatprep.nest.shelf import Shelf

NOWHERE = np.zeros(0)


def failed(loss: float) -> Spots:
    none = NOWHERE.astype(np.int64)
    return Spots(none, none, NOWHERE, NOWHERE.reshape(0, 2), 1, 100.0, loss)


def shelf_of(*losses: float) -> Shelf:
    shelf = Shelf()
    for loss in losses:
        shelf.add(failed(loss))
    return shelf


def losses_on(shelf: Shelf) -> list[float]:
    return [spots.loss for spots in shelf._kept]


def test_the_least_losses_are_kept_in_order():
    rng = np.random.default_rng(3)
    losses = rng.permutation(60) + 1.0
    assert losses_on(shelf_of(*losses)) == [float(k) for k in range(1, 41)]


def test_a_layout_that_is_there_is_not_kept_twice():
    shelf = shelf_of(100.0, 100.05, 99.95, 50.0)
    assert losses_on(shelf) == [50.0, 100.0]
    assert shelf.holds(100.09)
    assert not shelf.holds(100.2)
    assert len(shelf_of(100.0, 100.2)) == 2


def test_picks_come_mostly_from_the_top():
    """|z| of a standard normal deviate is below 2/3 in 49.5, below 4/3 in 81.8, below 2 in 95.4 of 100 (tables)."""
    shelf, rng = shelf_of(*range(1, 41)), np.random.default_rng(5)
    picks = np.array([shelf.pick(rng).loss for _ in range(4000)])
    for rank, share in ((1, 0.495), (2, 0.818), (3, 0.954)):
        assert np.mean(picks <= rank) == pytest.approx(share, abs=0.03)
    assert shelf_of(1.0).pick(rng).loss == 1.0
    assert {shelf_of(1.0, 2.0).pick(rng).loss for _ in range(50)} == {1.0, 2.0}
