"""Labels to be etched: where they lie, how they read, when they are left out."""

from dataclasses import replace

import numpy as np
import pytest
import shapely

from flatprep.bench.etch import EtchAsk, etch_faults, etching
from flatprep.bench.part import BenchPart
from flatprep.drawing.strokes import strokes
from flatprep.geom.bulge import Similarity
from flatprep.job.values import BendAsk
from flatprep.model.drawing import Curve, Part
from flatprep.model.work import Step, StepKind
from flatprep.profile.process_load import load_process
from tests.nest.parts import hook, rectangle, ring

ASK = EtchAsk(3.0, 10.0, 2.0)


def bench(part, **more):
    return BenchPart(part.name, part, load_process("fibre-laser"), thickness_mm=2.0, **more)


def etched(part, text="LEG B", steps=(), ask=ASK, **more):
    found = etching(bench(part, **more), part, steps, text, ask)
    for lines in (found.drawn, found.over):
        if lines:
            assert etch_faults(bench(part, **more), part, steps, lines, ask.clear_mm) == ""
    return found


def lines_of(curves):
    return shapely.MultiLineString([c.xyb[:, :2] for c in curves])


def height(curves):
    """Cap height: the first letter, L, has an upright as long as that."""
    return float(np.hypot(*(curves[0].xyb[1, :2] - curves[0].xyb[0, :2])))


def test_it_is_as_large_as_asked_where_there_is_room():
    found = etched(rectangle("leg", 200.0, 60.0))
    assert height(found.drawn) == pytest.approx(10.0)
    x0, y0, x1, y1 = lines_of(found.drawn).bounds
    # five signs: 4 pitches of 6 and a width of 4 units of 10 / 6 mm
    assert (x1 - x0, y1 - y0) == pytest.approx((28 * 10 / 6, 10.0))


def test_it_is_as_large_as_fits():
    """9 mm less twice 2 mm leave 5 mm."""
    assert height(etched(rectangle("leg", 200.0, 9.0)).drawn) == pytest.approx(5.0, rel=0.03)
    assert height(etched(rectangle("leg", 9.0, 200.0)).drawn) == pytest.approx(5.0, rel=0.03)  # turned upright


@pytest.mark.parametrize(
    ("part", "more", "why"),
    [
        (rectangle("leg", 200.0, 6.9), {}, "no room for letters of 3 mm"),
        (ring("leg", 30.0, 24.0), {}, "no room"),
        (rectangle("leg", 200.0, 60.0), {"text": "½"}, "signs that the alphabet lacks"),
        (rectangle("leg", 200.0, 60.0), {"good_face": "A"}, "its good face lies up"),
    ],
)
def test_it_is_left_out_with_the_reason(part, more, why):
    found = etched(part, **more)
    assert (found.drawn, found.over) == ((), ())
    assert why in found.why


def test_the_face_that_is_not_seen_may_have_one():
    assert etched(rectangle("leg", 200.0, 60.0), good_face="B").drawn


@pytest.mark.parametrize("turn", [0.0, 90.0, 37.0])
@pytest.mark.parametrize("mirrored", [False, True])
def test_it_reads_right_however_the_piece_lies(turn, mirrored):
    """On the sheet the label is the plain text turned and moved, never its mirror image."""
    part = hook("leg", 120.0, 90.0, 30.0)
    found = etched(part)
    placed = [Similarity(turn_deg=turn, dx=3.0, dy=4.0, mirrored=mirrored).points(c.xyb[:, :2])
              for c in (found.over if mirrored else found.drawn)]  # fmt: skip
    plain = strokes("LEG B", height(found.drawn))
    for a, b in zip(placed, plain, strict=True):
        assert np.hypot(*np.diff(a, axis=0).T) == pytest.approx(np.hypot(*np.diff(b, axis=0).T))
    (up, corner, right), (u, c, r) = placed[0], plain[0]
    assert turns_left(up - corner, right - corner) == turns_left(u - c, r - c)


def turns_left(a, b):
    return a[0] * b[1] - a[1] * b[0] > 0.0


def test_bends_marks_and_seats_are_kept_clear_of():
    """A bend of 90 degrees in 2 mm with radius 2 mm forms about 2 mm on each side of its line."""
    part = rectangle("leg", 200.0, 40.0)
    marked = replace(part, marks=(Curve(np.array([[120.0, 0, 0], [120.0, 40.0, 0]]), closed=False),))
    bend = BendAsk(90.0, 2.0, ((60.0, 0.0), (60.0, 40.0)))
    seat = Step(1, StepKind.COUNTERSINK, "M8", 16.0, at=((160.0, 20.0),))
    for one in (found := etched(marked, steps=(seat,), bends=(bend,))).drawn, found.over:
        lines = lines_of(one)
        assert lines.distance(shapely.LineString([(60, 0), (60, 40)])) >= 2.0 + 2.0
        assert lines.distance(shapely.LineString([(120, 0), (120, 40)])) >= 2.0 - 0.02
        assert lines.distance(shapely.Point(160, 20)) >= 8.0 + 2.0 - 0.02


def test_the_check_notices_what_is_wrong():
    part = Part("leg", rectangle("leg", 200.0, 40.0).outer, ring("r", 20.0, 8.0).holes)
    seat = Step(1, StepKind.COUNTERSINK, "M8", 16.0, at=((160.0, 20.0),))
    bend = BendAsk(90.0, 2.0, ((60.0, 0.0), (60.0, 40.0)))

    def fault(*points, **more):
        line = Curve(np.array([[x, y, 0.0] for x, y in points]), closed=False)
        return etch_faults(bench(part, **more), part, (seat,), (line,), 2.0)

    assert fault((100, 10), (100, 20), bends=(bend,)) == ""
    assert fault((100, 39), (100, 30)) == "it is 1.00 mm from an edge"
    assert fault((100, 41), (100, 30)) == "it leaves the material"
    assert fault((8.2, 1.5), (9.0, 3.0)).endswith("mm from an edge")
    assert fault((151, 20), (151, 22)) == "it is 1.00 mm from where countersink M8"
    assert fault((62, 20), (70, 22), bends=(bend,)).endswith("mm from a bend")
