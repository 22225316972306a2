"""Notes and what is told once: flat lengths, dense chords, letters of a word."""

from pathlib import Path

import numpy as np
import pytest

from flatprep.job.values import BendAsk, JobPart
from flatprep.model.finding import Severity
from flatprep.rules import run
from flatprep.rules.chord_density import MANY, SHORT_MM, dense_runs
from tests.measure.shapes import circle, part, path, polygon, rectangle
from tests.rules.setting import PLATE, context, found, laser, steel

# ---------------------------------------------------------------- flat-length


def bent(*bends, shape=None, material=None):
    job = JobPart(Path("plate.dxf"), "plate", material, 2.0, laser(), bends=bends)
    shape = shape or part(rectangle(0, 0, 96.1626, 40))
    return found("flat-length", context(shape, material=material, thickness=2.0, job_part=job))


def upright(x, angle=90.0, radius=2.0):
    return BendAsk(angle, radius, line=((x, 0.0), (x, 40.0)))


def test_one_bend_by_both_tables():
    """r 2, t 2, 90 degrees (worked check W072): allowance 4.16, flat 96.16 of 50 + 50 outside. By K 0.42 to 0.47:
    π / 2 (2 + 0.84) = 4.461, π / 2 (2 + 0.94) = 4.618."""
    (note,) = bent(upright(48.0813), material=steel())
    assert note.severity is Severity.NOTE
    assert note.measured == pytest.approx(4.1626, abs=1e-4)
    assert note.message == (
        "90° at r 2 mm: the allowance is 4.16 mm by DIN 6935, 4.46 to 4.62 mm by the K-factor table (K 0.42 to 0.47); "
        "96.16 mm flat make outside legs of 50.00 and 50.00 mm"
    )


def test_bends_of_one_kind_are_one_note():
    """Deduction 8 - 4.1626 = 3.8374, half of it a leg."""
    first, second = bent(upright(20.0), upright(70.0), upright(50.0, angle=45.0))
    assert "90° at r 2 mm, 2 lines" in first.message
    assert "with no K factor measured for this material" in first.message
    assert "comes out 1.92 mm longer" in first.message
    assert second.message.startswith("45° at r 2 mm: ")


def test_no_radius_no_note():
    assert bent(upright(48.0, radius=None)) == []


# ---------------------------------------------------------------- chord-density


@pytest.mark.parametrize(
    ("side", "sides", "loud"),
    [
        pytest.param(0.999 * SHORT_MM, MANY, True, id="just-below"),
        pytest.param(1.001 * SHORT_MM, 3 * MANY, False, id="just-above"),
        pytest.param(0.5 * SHORT_MM, MANY - 1, False, id="few"),
    ],
)
def test_the_length_of_a_chord_and_their_number_decide(side, sides, loud):
    r = side / (2 * np.sin(np.pi / sides))
    assert bool(found("chord-density", context(part(PLATE, polygon(50, 30, r, sides))))) is loud


def test_a_circle_of_very_short_chords():
    """1,000 sides of 0.05 mm: told once, with the mean chord."""
    r = 0.05 / (2 * np.sin(np.pi / 1000))
    (finding,) = found("chord-density", context(part(PLATE, polygon(50, 30, r, 1000))))
    assert finding.measured == pytest.approx(0.05)
    assert finding.message == "1000 chords draw 50.0 mm of curve"


def test_runs_are_found_across_the_seam():
    t = np.linspace(0, 8, 8 * 20 + 1)
    wave = np.column_stack([t, 0.01 * np.sin(t), 0 * t])
    xyb = np.vstack([wave, [(8, 20, 0), (0, 20, 0)]])
    for turn in (0, 50, 160):
        (run_,) = dense_runs(np.roll(xyb, -turn, axis=0))
        assert len(run_) == len(wave)
        assert run_[0].tolist() == pytest.approx([0, 0])
    assert dense_runs(xyb[::4]) == []
    assert len(wave) > MANY


# ---------------------------------------------------------------- letters


def letter_o(x, y, height=20.0, stroke=2.0):
    """Outline and counter of a square letter."""
    return rectangle(x, y, 0.7 * height, height), rectangle(
        x + stroke, y + stroke, 0.7 * height - 2 * stroke, height - 2 * stroke
    )


def letter_l(x, y, height=20.0, stroke=1.0):
    return path(
        (x, y),
        (x + 0.6 * height, y),
        (x + 0.6 * height, y + stroke),
        (x + stroke, y + stroke),
        (x + stroke, y + height),
        (x, y + height),
    )


def letter_t(x, y, height=20.0, stroke=1.0):
    m, w = x + 0.3 * height, stroke / 2
    return path(
        (m - w, y), (m + w, y), (m + w, y + height - stroke), (x + 0.6 * height, y + height - stroke),
        (x + 0.6 * height, y + height), (x, y + height), (x, y + height - stroke), (m - w, y + height - stroke),
    )  # fmt: skip


def letter_f(x, y, height=20.0, stroke=1.0):
    s, h = stroke, height
    return path(
        (x, y), (x + s, y), (x + s, y + 0.5 * h), (x + 0.5 * h, y + 0.5 * h), (x + 0.5 * h, y + 0.5 * h + s),
        (x + s, y + 0.5 * h + s), (x + s, y + h - s), (x + 0.6 * h, y + h - s), (x + 0.6 * h, y + h), (x, y + h),
    )  # fmt: skip


def loud(ctx):
    return [f for f in run(ctx) if f.severity is not Severity.NOTE]


def test_a_word_is_one_finding_a_rule():
    """L, T and F have strokes of 1 mm, under the slot limit of 1.5; alone each would be told by itself."""
    word = part(PLATE, letter_l(10, 20), letter_t(26, 20), letter_f(42, 20))
    (finding,) = loud(context(word, process=laser({"slot_min": 1.5})))
    assert (finding.rule, finding.measured, finding.limit) == ("narrow-slot", pytest.approx(1.0), 1.5)
    assert "in this lettering of 3 letters" in finding.message
    apart = [part(PLATE, shape) for shape in (letter_l(10, 20), letter_t(26, 20), letter_f(42, 20))]
    assert sum(len(loud(context(one, process=laser({"slot_min": 1.5})))) for one in apart) > 3


def test_islands_in_letters_are_one_finding():
    counters = []
    holes = [letter_l(10, 20), letter_t(26, 20), letter_f(42, 20)]
    for n, x in enumerate((58, 76)):
        outline, counter = letter_o(x, 20)
        holes.append(outline)
        counters.append(part(counter, name=f"plate#{n + 2}", depth=2))
    islands = [f for f in run(context(part(PLATE, *holes), *counters)) if f.rule == "loose-island"]
    (one,) = islands
    assert one.message.startswith("2 places in this lettering of 5 letters")


def test_a_row_of_equal_slots_is_no_word():
    """Vents of one free shape: each is told, for each has to be widened."""
    vents = [letter_l(10 + 16 * k, 20) for k in range(4)]
    told = loud(context(part(PLATE, *vents), process=laser({"slot_min": 1.5})))
    assert len({f.at[0] // 16 for f in told}) == 4
    assert not any("lettering" in f.message for f in told)


def test_findings_beside_the_word_stay():
    word = (letter_l(10, 20), letter_t(26, 20), letter_f(42, 20))
    small = circle(90, 10, 0.5)
    told = loud(context(part(PLATE, *word, small), process=laser({"slot_min": 1.5, "hole_min": 1.5})))
    assert sorted(f.rule for f in told) == ["narrow-slot", "small-hole"]
