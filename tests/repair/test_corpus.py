"""Every real drawing repaired: what comes out is sound, holds the same parts, and needs no second repair."""

import csv

import ezdxf
import pytest

from flatprep.base.errors import DrawingError
from flatprep.drawing.read import read
from flatprep.repair.clean import repair
from flatprep.repair.values import RepairOptions

pytestmark = pytest.mark.corpus
UNIT = {1.0: "mm", 25.4: "in", 10.0: "cm", 1000.0: "m"}
WRONG = {"open-contour", "duplicate-line", "off-plane"}


def faults_of(done, out):
    """What is wrong with a repaired drawing, in words."""
    out.write_text(done.text)
    after = read(out)
    before_mm2, after_mm2 = (sum(p.area_mm2 for p in parts) for parts in (done.before, after.parts))
    if ezdxf.readfile(out).audit().errors:
        yield "audit"
    if len(after.parts) != len(done.before):
        yield "parts"
    if abs(after_mm2 - before_mm2) > 1e-4 * before_mm2:
        yield "area"
    still = {f.kind for f in after.faults} & WRONG
    if still - {f.rule for f in done.left}:
        yield f"still {sorted(still)}"
    again = repair(out)
    if again.text != done.text or again.changes:
        yield "changes when repaired again"


def test_every_drawing_of_the_corpus(shared_data, tmp_path):
    corpus = shared_data / "corpus"
    wrong, refused, sound = [], 0, 0
    for row in csv.DictReader((corpus / "truth.csv").read_text().splitlines()):
        unit = UNIT[round(float(row["mm_per_unit"] or 1.0), 4)]
        try:
            done = repair(corpus / row["path"], RepairOptions(units=unit))
        except DrawingError:
            refused += 1
            continue
        wrong += [(row["path"], fault) for fault in faults_of(done, tmp_path / "clean.dxf")]
        sound += not {f.rule for f in done.left} & WRONG
    assert wrong == []
    assert refused <= 1  # one file of the corpus is broken for every reader
    assert sound >= 75
