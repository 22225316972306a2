"""Curves chained end to end, held against what was taken apart."""

from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.base.tolerances import DEFAULT
from flatprep.drawing.chain import chain
from flatprep.drawing.ends import groups, node_ids
from flatprep.drawing.tidy import tidy
from flatprep.drawing.walk import Laid, Walk, partners, walks
from flatprep.geom import bulge
from flatprep.model.drawing import Curve


def pieces_of(xyb, *, closed, cuts):
    """Open polylines that a polyline is cut into at some of its vertices."""
    rows = np.vstack([xyb, xyb[:1]]) if closed else xyb
    at = sorted({0, len(rows) - 1, *(c % (len(rows) - 1) for c in cuts)})
    out = []
    for a, z in pairwise(at):
        piece = rows[a : z + 1].copy()
        piece[-1, 2] = 0.0
        out.append(piece)
    return out


@st.composite
def taken_apart(draw):
    """A polyline of lines and arcs, whether it is closed, and its pieces in any order and direction."""
    n = draw(st.integers(3, 12))
    angle = np.linspace(0.0, 2 * np.pi, n, endpoint=False)
    bulges = draw(st.lists(st.sampled_from([0.0, 0.3, -0.2, 1.0]), min_size=n, max_size=n))
    xyb = np.column_stack([50 * np.cos(angle), 30 * np.sin(angle), bulges])
    closed = draw(st.booleans())
    pieces = pieces_of(xyb, closed=closed, cuts=draw(st.lists(st.integers(0, 20), min_size=2, max_size=12)))
    order = draw(st.permutations(range(len(pieces))))
    flips = draw(st.lists(st.booleans(), min_size=len(pieces), max_size=len(pieces)))
    mixed = [bulge.reverse(pieces[k], closed=False) if flips[k] else pieces[k] for k in order]
    return xyb, closed, [Curve(p, closed=False, handle=str(k)) for k, p in enumerate(mixed)]


@given(taken_apart())
def test_what_was_taken_apart_comes_together(case):
    xyb, closed, curves = case
    made = chain(curves, DEFAULT.join_mm)
    assert not made.branched
    assert not made.joined
    (one,) = made.closed if closed else made.open
    assert (len(made.closed), len(made.open)) == ((1, 0) if closed else (0, 1))
    assert one.pieces == len(curves)
    assert len(one.xyb) == len(xyb)
    drawn = xyb if closed else np.vstack([xyb[:-1], [*xyb[-1, :2], 0.0]])
    ways = [drawn, bulge.reverse(drawn, closed=closed)]
    turns = [np.roll(w, -k, axis=0) for w in ways for k in (range(len(xyb)) if closed else [0])]
    assert any(np.allclose(one.xyb, turn, atol=1e-9) for turn in turns)
    assert set(one.handles) == {c.handle for c in curves}
    if closed:  # it begins with the curve that was drawn first, run as it was drawn
        assert np.allclose(one.xyb[0], curves[0].xyb[0], atol=1e-9)
        assert one.handles[0] == "0"


def test_a_row_of_three_with_the_middle_one_turned():
    """Curve 1 runs from 10 to 20 backwards: ends 0-3 are one node, 2 and 4 another."""
    rows = [np.array([[x, 0.0, b], [z, 0.0, 0.0]]) for x, z, b in ((0, 10, 0.0), (20, 10, 0.5), (20, 30, 0.0))]
    laid = Laid.of(rows)
    nodes = node_ids(laid.ends, lambda _: 10.0, 0.01)
    assert nodes.tolist() == [0, 1, 2, 1, 2, 3]
    assert partners(nodes) == [-1, 3, 4, 1, 2, -1]
    (way,) = walks([0, 1, 2], nodes)
    assert way == Walk([0, 3, 4], closed=False)
    (xyb,) = laid.along([way])
    assert xyb.tolist() == [[0, 0, 0], [10, 0, -0.5], [20, 0, 0], [30, 0, 0]]


def test_curves_meet_midway():
    rows = [np.array([[0.0, 0, 0], [10, 0, 0]]), np.array([[10.0, 2, 0], [20, 0, 0]])]
    (xyb,) = Laid.of(rows).along([Walk([0, 2], closed=False)])
    assert xyb.tolist() == [[0, 0, 0], [10, 1, 0], [20, 0, 0]]


def test_a_curve_that_ends_where_it_begins():
    loop = np.array([[0.0, 0, 0], [10, 0, 0], [5, 8, 0], [0, 0, 0]])
    (one,) = chain([Curve(loop, closed=False)], DEFAULT.join_mm).closed
    assert abs(bulge.signed_area(one.xyb)) == pytest.approx(40.0)


def test_nets_are_left_whole_and_others_walked():
    """A T of three lines beside a triangle."""
    lines = [((0, 0), (5, 0)), ((100, 0), (110, 0)), ((5, 0), (9, 0)), ((110, 0), (105, 9)), ((5, 0), (5, 4))]
    lines.append(((105, 9), (100, 0)))
    curves = [Curve(np.array([[*a, 0.0], [*z, 0.0]]), closed=False, handle=str(k)) for k, (a, z) in enumerate(lines)]
    made = chain(curves, DEFAULT.join_mm)
    assert [c.handle for c in made.branched] == ["0", "2", "4"]
    assert [c.handles for c in made.closed] == [("1", "3", "5")]


@given(st.integers(1, 30), st.lists(st.tuples(st.integers(0, 29), st.integers(0, 29)), max_size=40))
def test_groups(size, pairs):
    """Against sets that are merged one by one."""
    pairs = [(a % size, b % size) for a, b in pairs]
    sets = [{k} for k in range(size)]
    for a, b in pairs:
        both = sets[a] | sets[b]
        for k in both:
            sets[k] = both
    columns = np.array(pairs, dtype=np.int64).reshape(-1, 2).T
    got = groups(size, *columns)
    assert all((got[a] == got[b]) == (b in sets[a]) for a in range(size) for b in range(size))
    assert list(dict.fromkeys(got.tolist())) == list(range(len({id(s) for s in sets})))


@given(st.lists(st.tuples(*[st.sampled_from([0.0, 0.004, 3.0, 7.0])] * 4), max_size=25))
def test_doubles_against_every_pair(lines):
    """The first of those that coincide within half of `same_mm`, either way round, is kept."""
    curves = [
        Curve(np.array([[a, b, 0.0], [c, d, 0.0]]), closed=False, handle=str(k))
        for k, (a, b, c, d) in enumerate(lines)
        if np.hypot(c - a, d - b) > 1.0
    ]
    kept, _ = tidy(curves, DEFAULT)
    expected = []
    for c in curves:
        ways = [c.xyb[:, :2], c.xyb[::-1, :2]]
        if not any(np.abs(w - e.xyb[:, :2]).max() <= DEFAULT.same_mm / 2.0 for e in expected for w in ways):
            expected.append(c)
    assert [c.handle for c in kept] == [c.handle for c in expected]
