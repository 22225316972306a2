"""Contacts are found where chance finds nothing: in slots without slack."""

import numpy as np
import pytest

from flatprep.nest.board import Ground, new_board, put, settle_all, weighted_loss
from flatprep.nest.outlines import pack
from flatprep.nest.shapes import Shape
from flatprep.nest.snap import room_for_contacts, snap
from flatprep.nest.tables import no_tables
from tests.nest.outlines import SQUARE

HUGE = 1e300


def ground_of(kinds, places, rect):
    o = pack(kinds, [(0.0,)] * len(kinds))
    board = new_board(np.arange(len(kinds)), np.array([rect]), len(kinds))
    for i, (x, y) in enumerate(places):
        put(o, board, i, i, x, y)
    return Ground(o, no_tables(o), board)


def snapped(ground, i, reach):
    kept = np.zeros((3, 6))
    x, y = ground.board.at[i]
    kept[0, :5] = weighted_loss(ground, i, i, x, y, HUGE), i, 0, x, y
    contacts = room_for_contacts()
    contacts.within[0] = reach
    tried = snap(ground, i, kept, 0, contacts, np.random.default_rng(1))
    return kept[0], tried


def test_a_square_finds_the_slot_it_just_fits():
    kinds = [Shape(SQUARE)] * 3
    ground = ground_of(kinds, [(0.0, 0.0), (20.0, 0.0), (10.3, 0.2)], [0.0, 0.0, 30.0, 10.5])
    row, tried = snapped(ground, 2, 0.6)
    assert row[0] == 0.0
    assert row[3] == pytest.approx(10.0, abs=1e-6)
    assert tried >= 1


def test_slanted_edges_meet():
    wedge = np.array([[0.0, 0.0], [10.0, 0.0], [0.0, 10.0]])
    other = np.array([[10.0, 10.0], [0.0, 10.0], [10.0, 0.0]])
    ground = ground_of([Shape(wedge), Shape(other)], [(0.0, 0.0), (-0.4, -0.3)], [0.0, 0.0, 10.0, 10.0])
    settle_all(ground)
    assert ground.board.loss[0, 1] > 0.0
    row, _ = snapped(ground, 1, 0.6)
    assert row[0] == 0.0
    assert row[3] == pytest.approx(0.0, abs=1e-6)
    assert row[4] == pytest.approx(0.0, abs=1e-6)


def test_contacts_out_of_reach_are_left_alone():
    kinds = [Shape(SQUARE)] * 3
    ground = ground_of(kinds, [(0.0, 0.0), (20.0, 0.0), (12.0, 0.2)], [0.0, 0.0, 32.0, 10.5])
    row, _ = snapped(ground, 2, 0.6)
    assert row[0] > 0.0
