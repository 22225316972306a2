"""What a job says reaches the nest."""

import pytest

from flatprep.api.nest import nest_ask
from flatprep.api.pieces import read_job
from flatprep.base.errors import JobError
from flatprep.job.load import load_job
from tests.cli.test_money import draw

JOB = """
process = "fibre-laser"
spacing = 4
margin = 9
sets = 3
windows = false
[[stock]]
name = "al3"
material = "al-5052-h32"
thickness = 3
length = 1000
width = 500
count = "any"
price_per_sheet = 40.5
grain = "length"
margins = [20, 10, 5, 0]
keep_out = [[0, 0, 60, 60]]
[[stock]]
name = "coil"
material = "al-5052-h32"
thickness = 3
length = "open"
width = 300
price_per_metre = 7
[[stock]]
name = "rest"
material = "al-5052-h32"
thickness = 3
outline = [[0, 0], [400, 0], [0, 250]]
[[part]]
drawing = "leaf.dxf"
material = "5052"
thickness = 3
quantity = 2
quantity_opposite = 1
turns = [0, 180]
may_flip = true
grain = "y"
filler = true
"""


@pytest.fixture
def ask(tmp_path):
    draw(tmp_path / "leaf.dxf", 200)
    (tmp_path / "job.toml").write_text(JOB)
    return nest_ask(read_job(load_job(tmp_path / "job.toml")))


def test_the_nest_itself(ask):
    assert (ask.spacing_mm, ask.margin_mm, ask.windows) == (4.0, 9.0, False)


def test_parts_count_for_all_sets(ask):
    leaf = ask.items[0]
    assert (leaf.name, leaf.material, leaf.thickness_mm) == ("leaf", "al-5052-h32", 3.0)
    assert (leaf.quantity, leaf.quantity_opposite) == (6, 3)
    assert (leaf.turns_deg, leaf.may_flip, leaf.grain, leaf.filler) == ((0.0, 180.0), True, "y", True)


@pytest.mark.parametrize(
    ("more", "flips"),
    [
        ("", True), ('good_face = "A"', False), ('good_face = "A"\nquantity_opposite = 1', True),
        ('[[part.work]]\nat = [[50, 25]]\ncountersink = "8 x 90"\nside = "A"', False),
        ('[[part.work]]\nat = [[50, 25]]\ntap = "M4"', True),
        ('[[part.bend]]\nline = [[20, -5], [20, 205]]\nangle = 90\nradius = 4\ndirection = "up"', False),
    ],
    ids=["plain", "good-face", "handed", "sunk", "tapped", "bent-up"],
)  # fmt: skip
def test_what_is_done_from_one_side_is_not_turned_over(tmp_path, more, flips):
    draw(tmp_path / "leaf.dxf", 200)
    part = 'drawing = "leaf.dxf"\nmaterial = "5052"\nthickness = 3\nmay_flip = true\n' + more
    stock = 'name = "al"\nmaterial = "5052"\nthickness = 3\nlength = 900\nwidth = 500'
    (tmp_path / "job.toml").write_text(f'name = "x"\nprocess = "fibre-laser"\n[[stock]]\n{stock}\n[[part]]\n{part}\n')
    asked = nest_ask(read_job(load_job(tmp_path / "job.toml")))
    assert asked.items[0].may_flip is flips


def test_sheets_open_lengths_and_remnants(ask):
    full, coil, rest = ask.stock
    assert (full.name, full.material, full.length_mm, full.width_mm) == ("al3", "al-5052-h32", 1000.0, 500.0)
    assert (full.count, full.price, full.price_per_metre, full.grain) == (None, 40.5, None, "length")
    assert (full.margins_mm, full.keep_out) == ((20.0, 10.0, 5.0, 0.0), ((0.0, 0.0, 60.0, 60.0),))
    assert (coil.length_mm, coil.width_mm, coil.price, coil.price_per_metre) == (None, 300.0, None, 7.0)
    assert (coil.count, coil.margins_mm, coil.keep_out) == (1, None, ())
    assert rest.outline.tolist() == [[0.0, 0.0], [400.0, 0.0], [0.0, 250.0]]
    assert (rest.length_mm, rest.width_mm) == (None, 250.0)


@pytest.mark.parametrize(("line", "words"), [('material = "5052"\n', "no material"), ("quantity = 2\n", None)])
def test_a_part_without_material_cannot_be_laid(tmp_path, line, words):
    draw(tmp_path / "leaf.dxf", 200)
    (tmp_path / "job.toml").write_text(JOB.replace(line, ""))
    read = read_job(load_job(tmp_path / "job.toml"))
    if words is None:
        assert nest_ask(read).items[0].quantity == 3
    else:
        with pytest.raises(JobError, match=words):
            nest_ask(read)


def test_a_job_without_stock(tmp_path):
    draw(tmp_path / "leaf.dxf", 200)
    (tmp_path / "job.toml").write_text('process = "fibre-laser"\n[[part]]\ndrawing = "leaf.dxf"\n')
    with pytest.raises(JobError, match=r"no \[\[stock\]\]"):
        nest_ask(read_job(load_job(tmp_path / "job.toml")))
