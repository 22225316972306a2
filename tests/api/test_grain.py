"""What is said of bends and the grain of the sheets."""

import pytest

from flatprep.api.nest import nest_job
from flatprep.api.pieces import read_job
from flatprep.job.load import load_job
from flatprep.nest.problem import Budget
from tests.drawing.draw import box, drawn

JOB = """
process = "fibre-laser"
[[stock]]
name = "plate"
material = "{material}"
thickness = 3
length = {length}
width = {width}
{grain}
[[part]]
drawing = "leaf.dxf"
name = "brace"
material = "{material}"
thickness = 3
quantity = 2
{part}
[[part.bend]]
line = {line}
angle = 90
radius = 12
"""
GRAIN = 'grain = "length"'


def nested(folder, material, grain=GRAIN, length=400, width=300, part="", height=30, line=((30, -1), (30, 31))):
    drawn(folder, lambda msp: box(msp, 0, 0, 90, height))
    path = folder / "job.toml"
    path.write_text(
        JOB.format(material=material, grain=grain, length=length, width=width, part=part, line=[*map(list, line)])
    )
    return nest_job(read_job(load_job(path)), Budget(steps=1))


def turns(done):
    return {round(p.turn_deg) % 180 for s in done.layout.sheets for p in s.placements}


@pytest.mark.parametrize("material", ["al-6061-t6", "wear-plate-500"])
def test_where_the_alloy_cracks_the_bend_is_upright_on_a_sheet_with_its_grain_lengthwise(tmp_path, material):
    done = nested(tmp_path, material)
    assert turns(done) == {0}
    assert f"brace: turned so that its bends cross the grain, along which {material} cracks" in done.notes


def test_there_it_goes_before_room(tmp_path):
    """Upright the bend needs 90 mm along the sheet; this one has 60."""
    done = nested(tmp_path, "al-6061-t6", length=60)
    assert [(u.part, u.count) for u in done.layout.unplaced] == [("brace", 2)]
    assert "turn" in done.layout.unplaced[0].why


def test_elsewhere_room_goes_before_it_and_it_is_told(tmp_path):
    done = nested(tmp_path, "al-5052-h32", length=60)
    assert done.layout.unplaced == ()
    assert turns(done) == {90}
    assert any(
        n.startswith("brace: 2 of 2 lie with a bend along the grain, where al-5052-h32 wants 1.5") for n in done.notes
    )


def test_elsewhere_it_is_preferred(tmp_path):
    """A square lies as well either way; its bend is drawn level, so it is turned."""
    done = nested(tmp_path, "al-5052-h32", height=90, line=((-1, 30), (91, 30)))
    assert turns(done) == {90}
    assert "brace: its bends cross the grain" in done.notes


def test_sheets_of_unknown_grain_are_warned_of_where_it_matters(tmp_path):
    must, may = (nested(tmp_path, material, grain="") for material in ("al-6061-t6", "al-5052-h32"))
    assert any("brace: al-6061-t6 cracks" in w and "plate states none" in w for w in must.warnings)
    assert not any("grain" in w for w in may.warnings)
    assert not any("grain" in n for n in (*must.notes, *may.notes))


def test_a_part_that_names_its_grain_is_left_to_it(tmp_path):
    done = nested(tmp_path, "al-6061-t6", part='grain = "y"')
    assert turns(done) == {90}
    assert not any("bends cross" in n for n in done.notes)
