"""What the page says of a job as a whole."""

from flatprep.api.pieces import read_job
from flatprep.api.prepare import drawn_twice
from flatprep.job.load import load_job
from tests.drawing.draw import box, drawn

JOB = """
process = "fibre-laser"
[[part]]
drawing = "alone.dxf"
material = "mild-steel"
thickness = 3
[[part]]
drawing = "together.dxf"
material = "mild-steel"
thickness = {thickness}
"""


def told(tmp_path, thickness=3):
    """A plate alone in its drawing, and another drawing that holds it, turned and moved, beside a larger one, twice."""
    drawn(tmp_path, lambda msp: box(msp, 0, 0, 80, 50), name="alone.dxf")

    def together(msp):
        box(msp, 100, 0, 50, 80)
        box(msp, 200, 0, 90, 80)
        box(msp, 300, 0, 90, 80)

    drawn(tmp_path, together, name="together.dxf")
    job = tmp_path / "job.toml"
    job.write_text(JOB.format(thickness=thickness))
    return list(drawn_twice(read_job(load_job(job)).pieces))


def test_parts_that_two_drawings_hold_are_told_and_copies_in_one_drawing_are_not(tmp_path):
    (line,) = told(tmp_path)
    assert line == "alone and together#1 seem alike or mirrored, from different drawings: all of them are cut"


def test_another_thickness_is_another_part(tmp_path):
    assert told(tmp_path, thickness=4) == []
