"""Remnants of a rack as stock of a job."""

import re
import shutil
from decimal import Decimal

import ezdxf
import pytest
from shapely.geometry import Polygon

from flatprep.api.nest import nest_job
from flatprep.api.pieces import read_job
from flatprep.api.remnants import with_remnants
from flatprep.api.sheets import write_layout
from flatprep.job.load import load_job
from flatprep.nest.problem import Budget
from tests.cli.test_money import draw

JOB = """
name = "gate"
revision = "C"
process = "fibre-laser"
spacing = 4
margin = 5
rack = "rack"
[[stock]]
name = "full"
material = "mild-steel"
thickness = 3
length = 1000
width = 500
grain = "length"
[[part]]
drawing = "leaf.dxf"
material = "mild-steel"
thickness = 3
quantity = 1
"""
SAID = ("material: S235", "thickness: 3 mm")
FEW = Budget(steps=5)


def remnant(rack, name, *texts, corners=((0, 0), (300, 0), (300, 200), (0, 200)), unit=4):
    doc = ezdxf.new()
    doc.header["$INSUNITS"] = unit
    doc.modelspace().add_lwpolyline(corners, close=True)
    for n, words in enumerate(texts, start=1):
        doc.modelspace().add_text(words, height=8).set_placement((0, -12 * n))
    doc.saveas(rack / name)


@pytest.fixture
def rack(tmp_path):
    (tmp_path / "rack").mkdir()
    draw(tmp_path / "leaf.dxf", 100)
    return tmp_path / "rack"


def read(folder, text=JOB):
    (folder / "job.toml").write_text(text)
    return read_job(load_job(folder / "job.toml"))


def test_a_remnant_goes_before_a_full_sheet(rack, tmp_path):
    remnant(rack, "a.dxf", *SAID, "label: R7")
    nested = nest_job(read(tmp_path), FEW)
    assert [s.stock for s in nested.layout.sheets] == ["R7"]
    # two lie on 120 x 220; four more make one column of 5 + 80 + 5 mm on the full sheet, six would need a second one
    remnant(rack, "a.dxf", *SAID, "label: R7", corners=((0, 0), (120, 0), (120, 220), (0, 220)))
    more = nest_job(read(tmp_path, JOB.replace("quantity = 1", "quantity = 6")), FEW)
    assert {s.stock: len(s.placements) for s in more.layout.sheets} == {"R7": 2, "full": 4}
    assert more.layout.sheets[-1].used_length_mm == pytest.approx(90.0)


def test_what_a_remnant_says_of_itself(rack, tmp_path):
    remnant(rack, "a.dxf", *SAID, "label: R7", "grain: width", "price: 4.20")
    job = with_remnants(read(tmp_path))[0].job
    one = job.stock[1]
    assert (one.name, one.material.id, one.thickness_mm, one.grain) == ("R7", "mild-steel", 3.0, "width")
    assert (one.price_per_sheet, one.count, one.rack_file) == (Decimal("4.20"), 1, "a.dxf")
    assert Polygon(one.outline).area == pytest.approx(300 * 200)


def test_others_are_counted_and_what_cannot_be_used_is_named(rack, tmp_path):
    remnant(rack, "thick.dxf", "material: mild-steel", "thickness: 4 mm")
    remnant(rack, "wood.dxf", "material: birch-ply", "thickness: 3 mm")
    bad = {
        "bare.dxf": ((), "does not say its material or thickness; left out: write the texts"),
        "half.dxf": (SAID[:1], 'does not say its thickness.* outline = "half.dxf"'),
        "odd.dxf": (("material: mild stell", SAID[1]), "unknown material.*did you mean"),
        "two.dxf": ((*SAID, "thickness: 5"), "say both"),
        "deep.dxf": (("material: S235", "thickness: deep"), "not a length"),
        "across.dxf": ((*SAID, "grain: x"), "grain: length"),
        "dear.dxf": ((*SAID, "price: lots"), "is no price"),
        "junk.dxf": (None, "not readable as DXF"),
        "bow.dxf": (SAID, "crosses itself at"),
        "unit.dxf": (SAID, "no header says which unit"),
    }
    for name, (texts, _) in bad.items():
        if texts is None:
            (rack / name).write_text("junk")
        elif name == "bow.dxf":
            remnant(rack, name, *texts, corners=((0, 0), (300, 0), (0, 200), (300, 200)))
        else:
            remnant(rack, name, *texts, unit=0 if name == "unit.dxf" else 4)
    _, shelf = with_remnants(read(tmp_path))
    assert [s.name for s in shelf.stock] == ["unit"]
    (line,) = shelf.notes
    assert line == f"{rack}: 2 remnants of materials or thicknesses that no part of this job has"
    assert len(shelf.warnings) == len(bad)
    for name, (_, words) in bad.items():
        (said,) = [w for w in shelf.warnings if w.startswith(str(rack / name))]
        assert re.search(words, said), said


def test_no_two_have_the_same_name(rack, tmp_path):
    remnant(rack, "a.dxf", *SAID, "label: same")
    remnant(rack, "b.dxf", *SAID, "label: same")
    remnant(rack, "full.dxf", *SAID)
    remnant(rack, "c.dxf", *SAID, "label: full (2)")
    remnant(rack, "d.dxf", *SAID, "label: full")
    names = [s.name for s in with_remnants(read(tmp_path))[0].job.stock]
    assert names == ["full", "a", "b", "full (2)", "d", "full (3)"]


def test_a_rack_of_nothing_but_other_things(rack, tmp_path):
    remnant(rack, "wood.dxf", "material: birch-ply", "thickness: 3 mm")
    alone = JOB.replace(JOB[JOB.index("[[stock]]") : JOB.index("[[part]]")], "")
    with pytest.raises(Exception, match="nothing of use in the rack"):
        nest_job(read(tmp_path, alone), FEW)
    remnant(rack, "a.dxf", *SAID)
    assert nest_job(read(tmp_path, alone), FEW).layout.unplaced == ()


def test_the_rest_that_one_job_leaves_is_stock_of_the_next(rack, tmp_path):
    """The rest keeps its place on the sheet: what is laid on it must keep clear of what was cut there."""
    first = nest_job(read(tmp_path, JOB.replace("quantity = 1", "quantity = 5")), FEW)
    write_layout(first, tmp_path / "out")
    shutil.copy(tmp_path / "out" / "sheet-01-rest.dxf", rack)
    second = nest_job(read(tmp_path, JOB.replace("quantity = 1", "quantity = 8")), FEW)
    (sheet,) = second.layout.sheets
    assert sheet.stock == "gate C, rest of sheet 1"
    assert second.read.job.stock[-1].grain == "length"

    def bodies(nested):
        outline = nested.read.pieces[0].part.outer.xyb[:, :2]
        return [Polygon(p.motion.points(outline)) for s in nested.layout.sheets for p in s.placements]

    assert all(a.distance(b) >= 4.0 + 5.0 - 1e-6 for a in bodies(first) for b in bodies(second))
