"""Rules that pass on what the reader noticed, and those of material, process and acceptance."""

from dataclasses import replace

import numpy as np
import pytest

from flatprep.job.values import Accept
from flatprep.model.drawing import Curve, Fault, Role, Skipped, Text
from flatprep.model.finding import Severity
from flatprep.profile.material import Verdict
from flatprep.profile.process import Terms
from flatprep.rules import run
from tests.measure.shapes import chorded, circle, part, path, rectangle
from tests.rules.setting import NEVER, PLATE, asked, context, found, laser, steel

ERROR, WARNING, NOTE = Severity.ERROR, Severity.WARNING, Severity.NOTE


def told(rule, **of_drawing):
    return [(f.severity, f.at, f.measured) for f in found(rule, context(part(PLATE), **of_drawing))]


@pytest.mark.parametrize(("gap", "severity"), [(0.06, NOTE), (0.1, NOTE), (0.101, ERROR), (4.0, ERROR), (None, ERROR)])
def test_open_contour(gap, severity):
    fault = Fault("open-contour", (3.0, 4.0), gap, ("1F",))
    assert told("open-contour", faults=(fault,)) == [(severity, (3.0, 4.0), gap)]


def test_open_contour_is_an_error_where_the_line_stays_loose_however_small():
    loose = Curve(np.array([[0, 0, 0], [0.05, 0, 0]], float), closed=False, handle="1F")
    fault = Fault("open-contour", (0.0, 0.0), 0.05, ("1F",))
    assert told("open-contour", faults=(fault,), loose=(loose,)) == [(ERROR, (0.0, 0.0), 0.05)]


@pytest.mark.parametrize(
    ("rule", "severity"),
    [("duplicate-line", ERROR), ("self-crossing", ERROR), ("unknown-units", WARNING), ("tiny-segment", NOTE),
     ("layer-role", NOTE), ("unsupported-entity", WARNING), ("doubtful-units", WARNING)],
)  # fmt: skip
def test_faults_are_passed_on(rule, severity):
    assert told(rule, faults=(Fault(rule, (1.0, 2.0), None, ("2A",), "a few words"),)) == [(severity, (1.0, 2.0), None)]
    assert told(rule) == []


@pytest.mark.parametrize(("spread", "severity"), [(0.0, NOTE), (5.0, WARNING), (None, WARNING)])
def test_off_plane(spread, severity):
    assert told("off-plane", faults=(Fault("off-plane", None, spread),)) == [(severity, None, spread)]


@pytest.mark.parametrize(("kind", "severity"), [("REGION", WARNING), ("DIMENSION", NOTE), ("LAYOUT", NOTE)])
def test_unsupported_entities_are_told_once_a_kind(kind, severity):
    skipped = tuple(Skipped(kind, "0", handle, "no line") for handle in ("A", "B"))
    (finding,) = found("unsupported-entity", context(part(PLATE), skipped=skipped))
    assert (finding.severity, finding.handles) == (severity, ("A", "B"))
    assert finding.message.startswith(f"2 x {kind} on layer 0")


def test_texts_on_the_part_are_warned_of_once():
    inside = tuple(Text(word, (50.0, 30.0), "0", word, 5.0) for word in ("LEFT", "RIGHT"))
    (finding,) = found("text-not-outlined", context(part(PLATE), texts=inside))
    assert (finding.severity, finding.at, finding.part) == (WARNING, (50.0, 30.0), "plate")
    beside = (Text("CUT 3", (500.0, 30.0), "0", "T", 5.0),)
    assert [f.severity for f in found("text-not-outlined", context(part(PLATE), texts=beside))] == [NOTE]
    roles = (("0", Role.MARK, "as said"),)
    assert [f.severity for f in found("text-not-outlined", context(part(PLATE), texts=inside, roles=roles))] == [NOTE]


def test_empty_drawing():
    assert [f.severity for f in found("empty-drawing", context())] == [ERROR]
    assert found("empty-drawing", context(part(PLATE))) == []


def test_several_parts():
    assert [f.severity for f in found("several-parts", context(part(PLATE), part(PLATE)))] == [NOTE]
    assert found("several-parts", context(part(PLATE))) == []


@pytest.mark.parametrize(("step", "count"), [(0.049, 1), (0.051, 0), (2.0, 0)])
def test_tiny_segment_is_a_slip_between_long_edges(step, count):
    jog = path((0, 0), (50, 0), (50, step), (100, step), (100, 60), (0, 60))
    assert len(found("tiny-segment", context(part(jog)))) == count


def test_fine_curves_and_straight_runs_are_no_slips():
    fine = chorded(circle(0, 0, 20), 1e-6)  # chords of 0.01 mm
    split = path((0, 0), (50, 0), (50.02, 0), (100, 0), (100, 60), (0, 60))
    uneven = path((0, 0), (50, 0), (50.03, 0.01), (50.06, 0.03), (50.07, 0.06), (50.07, 60), (0, 60))
    turns = ((0.06, 0.39), (0.04, 0.79), (0.06, 1.18))
    steps = np.array([[50, 0], *((n * np.cos(a), n * np.sin(a)) for n, a in turns)])
    corner = path((0, 0), *np.cumsum(steps, axis=0).tolist(), (50.1, 60), (0, 60))
    for outline in (fine, split, uneven, corner):
        assert found("tiny-segment", context(part(outline))) == []


KERF = laser({}, {})  # no limit for holes: only the kerf of 0.2 mm is left


@pytest.mark.parametrize(("width", "gone"), [(0.198, True), (0.2, False), (0.2 - 1e-9, False), (4.0, False)])
def test_holes_that_vanish_in_the_kerf(width, gone):
    ctx = context(part(PLATE, circle(50, 30, width / 2)), process=KERF)
    assert [(f.measured, f.limit) for f in found("lost-in-kerf", ctx)] == (
        [(pytest.approx(width), 0.2)] if gone else []
    )


@pytest.mark.parametrize(("neck", "pieces"), [(0.15, True), (0.25, False)])
def test_holes_that_fall_apart_in_the_kerf(neck, pieces):
    n = neck / 2
    dumb = path((40, 25), (45, 25), (45, 30 - n), (55, 30 - n), (55, 25), (60, 25), (60, 35), (55, 35), (55, 30 + n),
                (45, 30 + n), (45, 35), (40, 35))  # fmt: skip
    told_ones = found("lost-in-kerf", context(part(PLATE, dumb), process=KERF))
    assert ["2 pieces" in f.message for f in told_ones] == ([True] if pieces else [])


def test_the_kerf_is_silent_where_a_stricter_limit_speaks():
    ctx = context(part(PLATE, circle(50, 30, 0.05)))
    assert [f.rule for f in run(ctx) if f.severity is ERROR] == ["small-hole"]


def test_process_and_material():
    cannot = Verdict("no", "it melts", "", "made up")
    care = Verdict("care", "", "Never leave it alone.", "made up")
    shop = laser()  # its profile says nothing of materials
    other = replace(shop, families={"low-carbon-steel": Terms()})

    def ask(rule, process, verdict):
        material = steel(cuts={"laser": verdict})
        material = replace(material, cuts={"fibre-laser": verdict, "co2-laser": verdict})
        return [f.severity for f in found(rule, context(part(PLATE), process=process, material=material))]

    assert ask("unsafe-material", shop, NEVER) == [ERROR]
    assert ask("unsafe-material", shop, cannot) == []
    assert ask("wrong-process", other, cannot) == [ERROR]
    assert ask("wrong-process", shop, cannot) == [NOTE]
    assert ask("wrong-process", shop, care) == [NOTE]
    assert ask("wrong-process", other, NEVER) == []


@pytest.mark.parametrize(
    ("accept", "quiet"),
    [
        (Accept("small-hole", "for a pin", (50.0, 30.0)), True),
        (Accept("small-hole", "for a pin"), True),
        (Accept("small-hole", "for a pin", (50.9, 30.0)), True),
        (Accept("small-hole", "for a pin", (51.1, 30.0)), False),
        (Accept("thin-web", "for a pin"), False),
    ],
)
def test_accepted_findings_are_notes_with_the_reason(accept, quiet):
    process, material = laser(), steel()
    job_part = replace(asked(process, material), accepts=(accept,))
    ctx = context(part(PLATE, circle(50, 30, 1)), process=process, material=material, job_part=job_part)
    (finding,) = found("small-hole", ctx)
    assert finding.severity is (NOTE if quiet else ERROR)
    assert ("for a pin" in finding.message) is quiet


def test_worst_first():
    loud = [f.severity for f in run(context(part(PLATE, circle(50, 30, 1)), part(rectangle(200, 0, 50, 50))))]
    assert loud == sorted(loud, key=[ERROR, WARNING, NOTE].index)
    assert loud[0] is ERROR
