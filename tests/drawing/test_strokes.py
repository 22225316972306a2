"""The single-stroke alphabet."""

import string

import numpy as np
import pytest

from flatprep.drawing.strokes import CAP, PITCH, WIDE, spelled, strokes, width_over_height

SIGNS = string.ascii_uppercase + string.digits + "-._/+#"


@pytest.mark.parametrize("sign", SIGNS)
def test_every_sign_stays_in_its_cell(sign):
    points = np.vstack(strokes(sign, 6.0))
    assert points.min() >= 0.0
    assert points[:, 0].max() <= WIDE
    assert points[:, 1].max() <= CAP


def test_no_two_signs_are_drawn_alike():
    drawn = {sign: frozenset(s.tobytes() for s in strokes(sign, 6.0)) for sign in SIGNS}
    assert len(set(drawn.values())) == len(SIGNS)


def test_an_l_by_hand():
    (line,) = strokes("L", 12.0)
    assert line.tolist() == [[0.0, 12.0], [0.0, 0.0], [8.0, 0.0]]


def test_letters_follow_each_other():
    one, two = strokes("I", 3.0), strokes("II", 3.0)
    assert np.allclose(two[len(one)], one[0] + [PITCH / 2.0, 0.0])
    # two letters: one pitch of 6 and a width of 4 over a height of 6
    assert width_over_height("II") == pytest.approx(10 / 6)
    assert strokes(" ", 3.0) == ()


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("side_plate#2 b", "SIDE_PLATE#2 B"),
        ("Träger", "TRAGER"),
        ("½", None),
        ("梁", None),
        ("  ", None),
        ("a:b", None),
    ],
)
def test_what_can_be_spelled(text, said):
    assert spelled(text) == said
