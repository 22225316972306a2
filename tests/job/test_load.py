"""Job files: what is said comes back checked and in mm."""

import pickle
from decimal import Decimal
from pathlib import Path

import pytest

from flatprep.base.errors import FlatprepError, JobError
from flatprep.job.load import JobOptions, load_job
from flatprep.job.terms import Discount, Share
from flatprep.job.values import Pilots
from flatprep.model.drawing import Role
from tests.job.write import FULL, write_job


@pytest.fixture
def job(tmp_path):
    return load_job(write_job(tmp_path, FULL))


def test_the_head(job, tmp_path):
    assert (job.name, job.revision, job.process.id, job.units) == ("wheel hoe", "B", "fibre-laser", "mm")
    assert (job.spacing_mm, job.margin_mm, job.sets, job.mass_limit_kg) == (3.5, 25.4, 6, 12.5)
    assert (job.pilots, job.currency, job.windows) == (Pilots.CUT, "EUR", False)
    assert job.layers == {"FOLD": Role.BEND}
    assert job.path == tmp_path / "job.toml"


def test_a_part_with_everything(job, tmp_path):
    leaf = job.parts[0]
    assert leaf.drawing == tmp_path / "leaf.dxf"
    assert (leaf.name, leaf.drawing_units, leaf.material.id, leaf.thickness_mm) == ("leaf", "in", "al-5052-h32", 3.0)
    assert (leaf.quantity, leaf.quantity_opposite, leaf.may_flip, leaf.grain) == (12, 2, True, "x")
    assert leaf.turns_deg == (0.0, 90.0, 180.0, 270.0)
    assert leaf.layers == {"ETCH": Role.MARK}
    assert (leaf.filler, leaf.finish, leaf.good_face, leaf.revision, leaf.note) == (True, "powder", "A", "C", "handle")
    assert (leaf.accepts[0].rule, leaf.accepts[0].reason, leaf.accepts[0].at) == ("thin-web", "tested", (10.0, 20.0))


def test_what_a_job_accepts_is_accepted_of_every_part(tmp_path):
    text = 'process = "router"\n[[accept]]\nrule = "small-part"\nreason = "tabbed"\n'
    text += '[[part]]\ndrawing = "leaf.dxf"\n[[part.accept]]\nrule = "thin-web"\nreason = "tested"\n'
    text += '[[part]]\ndrawing = "plate.dxf"\n'
    leaf, plate = load_job(write_job(tmp_path, text)).parts
    assert [a.rule for a in leaf.accepts] == ["thin-web", "small-part"]
    assert [(a.rule, a.reason, a.at) for a in plate.accepts] == [("small-part", "tabbed", None)]


def test_bench_work_and_bends(job):
    leaf = job.parts[0]
    tap, ream, drill = leaf.work
    assert (tap.kind, tap.size, tap.hole_mm, tap.count, tap.side) == ("tap", "M5", 4.2, 4, "A")
    assert (ream.kind, ream.size, ream.hole_mm, ream.at) == ("ream", "6 H7", None, ((10.0, 12.0), (25.4, 0.0)))
    assert (drill.kind, drill.size, drill.depth_mm, drill.note) == ("drill", "6.35", 2.0, "blind")
    assert tap.where.endswith("part 1 (leaf), work 1")
    by_line, by_layer = leaf.bends
    assert (by_line.line, by_line.angle_deg, by_line.radius_mm) == (((0.0, 20.0), (80.0, 20.0)), 90.0, 3.0)
    assert (by_layer.layer, by_layer.radius_mm, by_layer.direction) == ("BEND", None, "up")


def test_nothing_between_parts_and_no_border_are_allowed(tmp_path):
    text = 'process = "router"\nspacing = 0\nmargin = 0\n[[part]]\ndrawing = "leaf.dxf"\n'
    job = load_job(write_job(tmp_path, text))
    assert (job.spacing_mm, job.margin_mm) == (0.0, 0.0)


@pytest.mark.parametrize(("quantity", "opposite"), [(2, 2), (0, 3), (3, 0)])
def test_handed_pairs(tmp_path, quantity, opposite):
    text = (
        f'process = "router"\n[[part]]\ndrawing = "leaf.dxf"\nquantity = {quantity}\nquantity_opposite = {opposite}\n'
    )
    part = load_job(write_job(tmp_path, text)).parts[0]
    assert (part.quantity, part.quantity_opposite) == (quantity, opposite)


def test_all_of_it_may_be_given_away(tmp_path):
    text = 'process = "router"\n[[part]]\ndrawing = "leaf.dxf"\n[cost]\noffcut_credit = 1\n'
    text += "[[cost.discount]]\nfrom = 0\npercent = 100\n"
    cost = load_job(write_job(tmp_path, text)).cost
    assert (cost.offcut_credit, cost.discounts) == (1, (Discount(Decimal(0), Decimal(100)),))


def test_a_hem_is_a_bend_of_180_degrees(tmp_path):
    text = 'process = "router"\n[[part]]\ndrawing = "leaf.dxf"\n[[part.bend]]\nlayer = "B"\nangle = 180\nradius = 0\n'
    bend = load_job(write_job(tmp_path, text)).parts[0].bends[0]
    assert (bend.angle_deg, bend.radius_mm) == (180.0, 0.0)


def test_joints(job):
    joint = job.joints[0]
    assert (joint.name, joint.fastener, joint.nut, joint.count) == ("pivot", "shoulder 1/4", "10-24", 2)
    leaf, washer, plate = joint.through
    assert (leaf.part, leaf.hole_mm, leaf.threaded) == ("leaf", 6.5, False)
    assert (washer.part, washer.spacer, washer.thickness_mm) == (None, "washer", 1.6)
    assert (plate.part, plate.at, plate.threaded) == ("plate", (5.0, 6.0), True)


def test_stock(job, tmp_path):
    sheet, strip, rest, drawn = job.stock
    assert (sheet.length_mm, sheet.width_mm, sheet.count, sheet.grain) == (2500.0, 1250.0, 2, "length")
    assert (sheet.price_per_sheet, sheet.measured_thickness_mm) == (Decimal("96.05"), 2.9)
    assert sheet.margins_mm == (10.0, 25.4, 8.0, 0.0)
    assert sheet.keep_out == ((0.0, 600.0, 60.0, 660.0),)
    assert (strip.margins_mm, strip.keep_out) == (None, ())
    assert (strip.length_mm, strip.width_mm, strip.count, strip.price_per_metre) == (None, 1219.2, None, Decimal("40"))
    assert strip.thickness_mm == pytest.approx(0.0598 * 25.4)  # 16 gauge mild steel
    assert rest.outline == ((0.0, 0.0), (900.0, 0.0), (700.0, 400.0))
    assert drawn.outline == tmp_path / "rest-07.dxf"
    assert (rest.length_mm, rest.width_mm, rest.count) == (None, None, 1)


def test_money(job):
    terms = job.cost
    assert (terms.share, terms.machine_rate, terms.offcut_credit) == (Share.BOX_AREA, Decimal("60.5"), Decimal("0.5"))
    assert (terms.offcut_least_mm, terms.scrap_per_kg, terms.breaks) == ((400.0, 200.0), Decimal("0.3"), (1, 5, 10))
    assert terms.discounts == (Discount(Decimal(100), Decimal(2)), Discount(Decimal(500), Decimal("7.5")))


def test_prices_and_densities_of_materials(job):
    plate = job.parts[1].material
    assert (plate.id, plate.density_kg_m3, plate.price_per_kg) == ("mild-steel", 7800.0, Decimal("1.15"))
    assert job.stock[1].material == plate


def test_the_smallest_job_has_the_defaults(tmp_path):
    job = load_job(write_job(tmp_path, 'process = "router"\n[[part]]\ndrawing = "leaf.dxf"\n'))
    part = job.parts[0]
    assert (job.name, job.revision, job.sets, job.stock, job.currency) == ("job", "", 1, (), None)
    assert (job.spacing_mm, job.margin_mm, job.mass_limit_kg, job.pilots) == (6.0, 15.0, None, Pilots.AS_DRAWN)
    assert (part.name, part.quantity, part.quantity_opposite, part.turns_deg) == ("leaf", 1, 0, None)
    assert (part.material, part.thickness_mm, part.process) == (None, None, job.process)
    assert (job.cost.offcut_credit, job.cost.scrap_per_kg, job.cost.machine_rate, job.cost.discounts) == (
        0,
        0,
        None,
        (),
    )
    assert job.cost.offcut_least_mm == (300.0, 300.0)
    assert (job.cost.share, job.cost.breaks, job.windows) == (Share.NET_AREA, (1, 2, 5, 10, 25), None)


@pytest.mark.parametrize(
    ("turns", "expected"), [("", (0.0, 180.0)), ('turns = "free"', None), ("turns = [45]", (45.0,))]
)
def test_face_grain_turns_by_half_unless_told(tmp_path, turns, expected):
    text = f'process = "router"\n[[part]]\ndrawing = "leaf.dxf"\nmaterial = "birch-ply"\nthickness = 6\n{turns}\n'
    assert load_job(write_job(tmp_path, text)).parts[0].turns_deg == expected


def test_bare_numbers_are_in_the_units_of_the_job(tmp_path):
    text = """units = "in"
process = "fibre-laser"
spacing = 0.125
[[part]]
drawing = "leaf.dxf"
thickness = 0.25
[[part.work]]
hole = 0.5
drill = 0.75
[[stock]]
name = "s"
material = "mild-steel"
thickness = "3mm"
length = 96
width = "4ft"
"""
    job = load_job(write_job(tmp_path, text))
    assert job.spacing_mm == pytest.approx(3.175, rel=1e-12)
    assert job.margin_mm == 8.0  # the process's own stays what it is
    assert job.parts[0].thickness_mm == pytest.approx(6.35, rel=1e-12)
    assert job.parts[0].work[0].hole_mm == pytest.approx(12.7, rel=1e-12)
    assert job.parts[0].work[0].size == "19.05"
    assert (job.stock[0].thickness_mm, job.stock[0].length_mm, job.stock[0].width_mm) == pytest.approx(
        (3.0, 2438.4, 1219.2), rel=1e-12
    )


def test_a_part_keeps_its_own_process_and_files_are_seen_from_the_job(tmp_path):
    (tmp_path / "mill.toml").write_text('kind = "router"\ntool_diameter = 4\n')
    text = 'process = "fibre-laser"\n[[part]]\ndrawing = "leaf.dxf"\nprocess = "mill.toml"\n'
    job = load_job(write_job(tmp_path, text), JobOptions(process="co2-laser"))
    assert job.process.id == "co2-laser"
    assert job.parts[0].process.tool_diameter_mm == 4.0


def test_options_fill_in_what_a_part_leaves_open(tmp_path):
    options = JobOptions(material="acrylic", thickness="5mm", units="cm", layers={"X": Role.IGNORE})
    text = """process = "co2-laser"
layers = { X = "cut", Y = "mark" }
[[part]]
drawing = "leaf.dxf"
drawing_units = "in"
[[part]]
drawing = "plate.dxf"
material = "birch-ply"
thickness = 4
"""
    job = load_job(write_job(tmp_path, text), options)
    assert [(p.material.id, p.thickness_mm, p.drawing_units) for p in job.parts] == [
        ("acrylic", 5.0, "cm"),
        ("birch-ply", 4.0, "cm"),
    ]
    assert job.layers == {"X": Role.IGNORE, "Y": Role.MARK}


def test_own_profiles_are_found(tmp_path):
    own = tmp_path / "own"
    (own / "materials").mkdir(parents=True)
    (own / "materials" / "felt.toml").write_text('family = "leather"\ndensity = 300\n')
    text = 'process = "co2-laser"\n[[part]]\ndrawing = "leaf.dxf"\nmaterial = "felt"\n'
    path = write_job(tmp_path, text)
    assert load_job(path, JobOptions(profile_folders=(own,))).parts[0].material.density_kg_m3 == 300.0
    with pytest.raises(JobError, match="unknown material"):
        load_job(path)


def test_a_cut_list_beside_the_job(tmp_path):
    (tmp_path / "cutlist.csv").write_text(
        "file,material,thickness,quantity,quantity_opposite,revision,note\nplate.dxf,birch plywood,6,4,1,D,tray\n"
    )
    text = 'process = "router"\nparts = "cutlist.csv"\n[[part]]\ndrawing = "leaf.dxf"\n'
    leaf, plate = load_job(write_job(tmp_path, text)).parts
    assert leaf.name == "leaf"
    assert (plate.name, plate.material.id, plate.thickness_mm) == ("plate", "birch-ply", 6.0)
    assert (leaf.quantity, leaf.quantity_opposite) == (1, 0)
    assert (plate.quantity, plate.quantity_opposite, plate.revision, plate.note) == (4, 1, "D", "tray")
    assert plate.turns_deg == (0.0, 180.0)


def test_a_cut_list_in_a_folder_names_drawings_from_there(tmp_path):
    (tmp_path / "lists").mkdir()
    (tmp_path / "lists" / "tray.dxf").touch()
    (tmp_path / "lists" / "cutlist.csv").write_text("file,material,thickness,quantity\ntray.dxf,hdpe,6,1\n")
    job = load_job(write_job(tmp_path, 'process = "router"\nparts = "lists/cutlist.csv"\n'))
    assert job.parts[0].drawing == tmp_path / "lists" / "tray.dxf"


@pytest.mark.parametrize(
    ("row", "words"),
    [
        ("none.dxf,hdpe,6,1", 'line 2: file = "none.dxf": no such file'),
        ("plate.dxf,hdpee,6,1", 'line 2: material = "hdpee": unknown material'),
        ("plate.dxf,hdpe,thick,1", 'line 2: thickness = "thick"'),
        ("plate.dxf,hdpe,16ga,1", 'line 2: thickness = "16ga"'),
        ("plate.dxf,hdpe,6,0", "line 2: quantity = 0"),
        ("plate.dxf,hdpe,6,many", 'line 2: quantity = "many"'),
    ],
)
def test_mistakes_of_a_cut_list_name_its_line(tmp_path, row, words):
    (tmp_path / "cutlist.csv").write_text(f"file,material,thickness,quantity\n{row}\n")
    with pytest.raises(JobError) as caught:
        load_job(write_job(tmp_path, 'process = "router"\nparts = "cutlist.csv"\n'))
    assert "cutlist.csv" in caught.value.message
    assert words in caught.value.message


def test_jobs_travel_to_worker_processes(job):
    assert pickle.loads(pickle.dumps(job)) == job


def test_a_job_that_is_not_there():
    with pytest.raises(JobError, match="no such file"):
        load_job(Path("no/such/job.toml"))


@pytest.mark.parametrize("options", [JobOptions(process="lazer"), JobOptions(material="x"), JobOptions(thickness="-3")])
def test_options_that_cannot_be_used(tmp_path, options):
    path = write_job(tmp_path, 'process = "router"\n[[part]]\ndrawing = "leaf.dxf"\n')
    with pytest.raises(FlatprepError):
        load_job(path, options)
