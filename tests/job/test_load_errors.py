"""Every mistake in a job file: one message with file, key and value, and what is allowed."""

import pytest

from flatprep.base.errors import FlatprepError, JobError
from flatprep.job.load import JobOptions, load_job
from tests.job.write import FULL, write_job

CASES = [
    # (what stands in the job, what stands there instead, words of the message)
    ('units = "mm"', 'units = "furlong"', 'units = "furlong": must be one of "mm"'),
    ('name = "wheel hoe"', "name = 3", "name = 3: must be a text"),
    ('revision = "B"', "revision = [1]", "revision = [1]: must be a text"),
    ('process = "fibre-laser"\n', "", "process is missing"),
    ('process = "fibre-laser"', 'process = "fiber-laser"', 'process = "fiber-laser": unknown process'),
    ('process = "fibre-laser"', "process = 7", "process = 7: must be a text"),
    ('process = "fibre-laser"', 'process = "mine.toml"', 'process = "mine.toml": no such file'),
    ("spacing = 3.5", "spacing = -1", "spacing = -1: must be a number of 0 or more"),
    ("spacing = 3.5", 'spacing = "wide"', 'spacing = "wide": must be a length'),
    ("spacing = 3.5", "spaceing = 3.5", "unknown key spaceing = 3.5"),
    ('margin = "1in"', "margin = true", "margin = true: must be a number"),
    ("sets = 6", "sets = 0", "sets = 0: must be a whole number from 1"),
    ("sets = 6", "sets = 1.5", "sets = 1.5: must be a whole number"),
    ("mass_limit = 12.5", "mass_limit = 0", "mass_limit = 0: must be a number above 0"),
    ("mass_limit = 12.5", 'mass_limit = "12 kg"', 'mass_limit = "12 kg": must be a number'),
    ('pilots = "cut"', 'pilots = "drill"', 'pilots = "drill": must be one of "as-drawn", "cut", "mark"'),
    ('currency = "EUR"', 'currency = "euro"', 'currency = "euro": must be a code of three capital letters'),
    ('margin = "1in"', "margin = -0.5", "margin = -0.5: must be a number of 0 or more"),
    ("windows = false", 'windows = "no"', 'windows = "no": must be true or false'),
    ('FOLD = "bend"', 'FOLD = "fold"', 'layers: FOLD = "fold": must be one of "cut", "mark", "bend", "ignore"'),
    ("[material.mild-steel]", "[material.mildsteel]", 'material."mildsteel": unknown material id'),
    ("density = 7800", "density = 0", "material, mild-steel: density = 0: must be a number above 0"),
    ("density = 7800", "density = 7.8e6", "density = 7800000.0: must be kilograms per cubic metre"),
    ("length = 2500", "length = 1e300", "length = 1e+300: must be a length of 10 km at the most"),
    ("price_per_kg = 1.15", "price_per_kg = -1", "price_per_kg = -1: must be a number of 0 or more"),
    ("price_per_kg = 1.15", "price = 1.15", "material, mild-steel: unknown key price = 1.15"),
    ('share = "box-area"', 'share = "weight"', 'cost: share = "weight": must be one of "net-area"'),
    ("machine_rate = 60.5", 'machine_rate = "60 EUR"', 'cost: machine_rate = "60 EUR": must be a number'),
    ("offcut_credit = 0.5", "offcut_credit = 1.5", "offcut_credit = 1.5: must be a share"),
    ("offcut_least = [400, 200]", "offcut_least = [400, 0]", "offcut_least = [400, 0]: must be two lengths above 0"),
    ("offcut_least = [400, 200]", "offcut_least = 400", "offcut_least = 400: must be a point"),
    ("breaks = [10, 1, 5, 5]", "breaks = [1.5]", "breaks = [1.5]: must be a list of whole numbers"),
    ("breaks = [10, 1, 5, 5]", "breaks = []", "breaks = []: must be a list of whole numbers"),
    ("from = 500\n", "", "cost, discount 1: from is missing"),
    ("percent = 7.5", "percent = 107", "percent = 107: must be a number from 0 to 100"),
    ("scrap_per_kg = 0.3", "scrap = 0.3", "cost: unknown key scrap = 0.3"),
    ('name = "al3"\n', "", "stock 1: name is missing"),
    ('name = "strip"', 'name = "al3"', '2 stocks are called "al3"'),
    ('material = "S235"\n', "", "stock 2 (strip): material is missing"),
    ('material = "S235"', 'material = "S236"', 'stock 2 (strip): material = "S236": unknown material'),
    ('thickness = "16ga"\n', "", "stock 2 (strip): thickness is missing"),
    ('thickness = "16ga"', "thickness = -3", "stock 2 (strip): thickness = -3"),
    ('thickness = "16ga"', "thickness = [3]", "stock 2 (strip): thickness = [3]: must be a thickness"),
    ('thickness = "16ga"', 'thickness = "99ga"', "no gauge 99 in steel"),
    ("length = 2500", "length = 0", "stock 1 (al3): length = 0: must be a number above 0"),
    ("length = 2500", 'length = "opn"', 'stock 1 (al3): length = "opn": must be a length above 0, or "open"'),
    ("length = 2500\n", "", "stock 1 (al3): length is missing"),
    ("width = 1250\n", "", "stock 1 (al3): width is missing"),
    ("width = 1250", 'width = 1250\noutline = "rest-07.dxf"', "length = 2500: must be left out where an outline"),
    ("count = 2\nprice_per_sheet", "count = 0\nprice_per_sheet", "count = 0: must be a whole number from 1"),
    ('count = "any"', 'count = "all"', 'count = "all": must be a whole number of sheets, or "any"'),
    ("price_per_sheet = 96.05", "price_per_sheet = -1", "price_per_sheet = -1: must be a number of 0 or more"),
    ("price_per_sheet = 96.05", "price_per_sheet = 1e30", "price_per_sheet = 1e+30: must be a number from 0 to 1e+12"),
    ("price_per_sheet = 96.05", "price_per_sheet = nan", "price_per_sheet = nan: must be a number"),
    (
        "price_per_sheet = 96.05",
        "price_per_metre = 96",
        "price_per_metre = 96: must be left out: stock of a sheet of given size has a price_per_sheet",
    ),
    (
        "price_per_metre = 40",
        "price_per_sheet = 40",
        "price_per_sheet = 40: must be left out: stock of open length has a price_per_metre",
    ),
    ('grain = "length"', 'grain = "x"', 'grain = "x": must be one of "length", "width"'),
    ("measured_thickness = 2.9", "measured_thickness = 0", "measured_thickness = 0: must be a number above 0"),
    ('margins = [10, "1in", 8, 0]', "margins = 10", "margins = 10: must be four lengths"),
    ('margins = [10, "1in", 8, 0]', "margins = [1, 2, 3]", "margins = [1, 2, 3]: must be four lengths"),
    ('margins = [10, "1in", 8, 0]', "margins = [10, -1, 8, 0]", "margins = [10, -1, 8, 0]: must be four lengths of 0"),
    ('margins = [10, "1in", 8, 0]', 'margins = ["x", 1, 8, 0]', "must be a length"),
    ("keep_out = [[0, 600, 60, 660]]", "keep_out = [0, 600, 60, 660]", "must be a list of boxes"),
    ("keep_out = [[0, 600, 60, 660]]", "keep_out = 3", "keep_out = 3: must be a list of boxes"),
    ("keep_out = [[0, 600, 60, 660]]", "keep_out = [[60, 600, 60, 660]]", "with x0 below x1 and y0 below y1"),
    ("keep_out = [[0, 600, 60, 660]]", "keep_out = [[60, 600, 0]]", "with a radius above 0"),
    (
        "keep_out = [[0, 600, 60, 660]]",
        "keep_out = [[60, 600]]",
        "must be a list of boxes [x0, y0, x1, y1] and circles",
    ),
    ("keep_out = [[0, 600, 60, 660]]", 'keep_out = [[60, 600, "wide"]]', "a length"),
    (
        'outline = "rest-07.dxf"',
        'outline = "rest-07.dxf"\nmargins = [1, 1, 1, 1]',
        "left out where an outline is given",
    ),
    ("measured_thickness = 2.9", "measured = 2.9", "stock 1 (al3): unknown key measured = 2.9"),
    ("[[0, 0], [900, 0], [700, 400], [0, 0]]", "[[0, 0], [9, 0]]", "must be three points or more that enclose an area"),
    ("[[0, 0], [900, 0], [700, 400], [0, 0]]", "[[0, 0], [9, 9], [9, 0], [0, 8]]", "does not cross or touch itself"),
    # both lobes of a bow are as large: its signed area is nothing, and it crosses itself
    ("[[0, 0], [900, 0], [700, 400], [0, 0]]", "[[0, 0], [9, 9], [9, 0], [0, 9]]", "does not cross or touch itself"),
    ("[[0, 0], [900, 0], [700, 400], [0, 0]]", "[[0, 0], [9, 9], [4, 4]]", "three points or more that enclose an area"),
    ("[[0, 0], [900, 0], [700, 400], [0, 0]]", "[1, 2, 3]", "must be a list of points"),
    ("[[0, 0], [900, 0], [700, 400], [0, 0]]", "7", "outline = 7: must be a drawing's file, or a list of points"),
    ('outline = "rest-07.dxf"', 'outline = "rest-08.dxf"', 'outline = "rest-08.dxf": no such file'),
    ('drawing = "leaf.dxf"\n', "", "part 1 (leaf): drawing is missing"),
    ('drawing = "leaf.dxf"', 'drawing = "leef.dxf"', 'part 1 (leaf): drawing = "leef.dxf": no such file'),
    ('drawing = "leaf.dxf"', 'drawing = ""', 'part 1 (leaf): drawing = "": must be a text'),
    ('drawing = "leaf.dxf"', 'drawing = "."', 'drawing = ".": no such file'),
    ('drawing = "leaf.dxf"', 'drawing = "a\\u0000b"', "drawing"),
    ('drawing = "leaf.dxf"', 'drawing = "' + "x" * 300 + '"', "File name too long"),
    ('name = "leaf"', 'name = ""', 'name = "": must be a text'),
    ('name = "leaf"', 'name = "plate"', '2 parts are called "plate": part 1 (plate), part 2 (plate.dxf)'),
    ('drawing_units = "in"', 'drawing_units = "inch"', 'drawing_units = "inch": must be one of "mm"'),
    ("quantity = 12", "quantity = -3", "part 1 (leaf): quantity = -3: must be a whole number from 0"),
    ("quantity = 12", "quantity = 12.0", "part 1 (leaf): quantity = 12.0: must be a whole number"),
    ("quantity = 12", 'quantity = "12"', 'part 1 (leaf): quantity = "12": must be a whole number'),
    ("quantity = 12", "quantty = 12", "part 1 (leaf): unknown key quantty = 12"),
    ("quantity = 12\nquantity_opposite = 2", "quantity = 0", "quantity = 0: must be 1 or more"),
    ("turns = [0, 90, 180, 270]", "turns = []", 'turns = []: must be "free" or a list of degrees'),
    ("turns = [0, 90, 180, 270]", 'turns = "any"', 'turns = "any": must be "free" or a list'),
    ("turns = [0, 90, 180, 270]", "turns = [true]", "turns = [true]: must be a number"),
    ("may_flip = true", "may_flip = 1", "may_flip = 1: must be true or false"),
    ('grain = "x"', 'grain = "length"', 'grain = "length": must be one of "x", "y"'),
    ('good_face = "A"', 'good_face = "top"', 'good_face = "top": must be one of "A", "B"'),
    ('layers = { ETCH = "mark" }', 'layers = "ETCH"', 'layers = "ETCH": must be a table'),
    ('rule = "thin-web"\n', "", "part 1 (leaf), accept 1: rule is missing"),
    ('reason = "tested"', 'reason = ""', 'reason = "": must be a text'),
    ("at = [10, 20]", "at = [10]", "accept 1: at = [10]: must be a point"),
    ("hole = 4.2", "hole = 0", "part 1 (leaf), work 1: hole = 0: must be a number above 0"),
    ("hole = 4.2", 'hole = "x"', 'part 1 (leaf), work 1: hole = "x": must be a length'),
    ("hole = 4.2\n", "", "part 1 (leaf), work 1: neither hole nor at given"),
    ("hole = 4.2", "hole = 4.2\nat = [[1, 2]]", "part 1 (leaf), work 1: both hole and at given"),
    ('tap = "M5"\n', "", "part 1 (leaf), work 1: nothing to do"),
    ('tap = "M5"', 'tap = "M5"\nream = "6 H7"', "part 1 (leaf), work 1: tap and ream to do"),
    ('tap = "M5"', "tap = [5]", "tap = [5]: must be a text"),
    ('tap = "M5"', 'tapp = "M5"', 'part 1 (leaf), work 1: unknown key tapp = "M5"'),
    ("count = 4\n", "count = 0\n", "work 1: count = 0: must be a whole number from 1"),
    ('side = "A"\n[[part.work]]', 'side = "top"\n[[part.work]]', 'side = "top": must be one of "A", "B"'),
    ('at = [[10, 12], ["1in", 0]]', "at = []", "work 2: at = []: must be a list of one point or more"),
    ('at = [[10, 12], ["1in", 0]]', "at = [10, 12]", "work 2: at = [10, 12]: must be a list of points"),
    ("depth = 2", "depth = -2", "work 3: depth = -2: must be a number above 0"),
    ("line = [[0, 20], [80, 20]]", "line = [[0, 20]]", "bend 1: line = [[0, 20]]: must be two different points"),
    ("line = [[0, 20], [80, 20]]", "line = [[0, 20], [0, 20]]", "must be two different points"),
    ("line = [[0, 20], [80, 20]]\n", "", "bend 1: neither line nor layer given"),
    ("angle = 90", "angle = 0", "bend 1: angle = 0: must be a number above 0"),
    ("angle = 90", "angle = 181", "bend 1: angle = 181: must be degrees above 0, up to 180"),
    ("radius = 3", "radius = -3", "bend 1: radius = -3: must be a number of 0 or more"),
    ('direction = "up"', 'direction = "left"', 'bend 2: direction = "left": must be one of "up", "down"'),
    ('fastener = "shoulder 1/4"\n', "", "joint 1: fastener is missing"),
    ('part = "leaf"\nhole', 'part = "leef"\nhole', 'joint 1, through 1: part = "leef": must be one of "leaf", "plate"'),
    ('spacer = "washer"\n', "", "joint 1, through 2: give either part or spacer"),
    ("thickness = 1.6\n", "", "joint 1, through 2: thickness is missing"),
    ("threaded = true", "threaded = 1", "joint 1, through 3: threaded = 1: must be true or false"),
    ("threaded = true", "thread = true", "joint 1, through 3: unknown key thread = true"),
    ('name = "wheel hoe"', 'name = "wheel hoe', "is not TOML"),
    ("[layers]", "[[layers]]", 'layers = [{ FOLD = "bend" }]: must be a table'),
]


@pytest.mark.parametrize(("good", "bad", "words"), CASES, ids=lambda v: v[:40].replace("\n", " "))
def test_mistake(tmp_path, good, bad, words):
    assert FULL.count(good) >= 1, "the case no longer fits the job"
    path = write_job(tmp_path, FULL.replace(good, bad, 1))
    with pytest.raises(JobError) as caught:
        load_job(path)
    assert caught.value.message.startswith(str(path))
    assert words in caught.value.message


def test_a_folder_in_place_of_a_job_is_told_how_to_get_one(tmp_path):
    with pytest.raises(JobError, match="is a folder") as caught:
        load_job(tmp_path)
    assert caught.value.remedy == f"flatprep draft {tmp_path} --out {tmp_path}/job.toml writes one from its drawings"


def test_a_job_without_parts(tmp_path):
    with pytest.raises(JobError, match="has no part"):
        load_job(write_job(tmp_path, 'process = "router"\n'))


def test_a_joint_without_layers(tmp_path):
    text = 'process = "router"\n[[part]]\ndrawing = "leaf.dxf"\n[[joint]]\nfastener = "M6"\n'
    with pytest.raises(JobError, match="joint 1: through is missing"):
        load_job(write_job(tmp_path, text))


@pytest.mark.parametrize(
    ("key", "nearest"),
    [("quantty", "quantity"), ("drawng", "drawing"), ("thicknes", "thickness"), ("mayflip", "may_flip")],
)
def test_a_misspelt_key_gets_the_nearest(tmp_path, key, nearest):
    text = f'process = "router"\n[[part]]\n{key} = 1\n'
    with pytest.raises(JobError) as caught:
        load_job(write_job(tmp_path, text))
    assert f"unknown key {key} = 1" in caught.value.message
    assert caught.value.remedy.startswith(f'did you mean "{nearest}"')


@pytest.fixture
def mail(tmp_path):
    """A job two folders deep, a drawing beside its folder, and one further off."""
    home = tmp_path / "inbox" / "job"
    home.mkdir(parents=True)
    (tmp_path / "inbox" / "shared").mkdir()
    (tmp_path / "inbox" / "shared" / "near.dxf").touch()
    (tmp_path / "secret.dxf").touch()
    (home / "deep").mkdir()
    (home / "deep" / "own.dxf").touch()
    return home


def job_of(home, drawing):
    return write_job(home, f'process = "router"\n[[part]]\ndrawing = "{drawing}"\n')


@pytest.mark.parametrize("drawing", ["deep/own.dxf", "../shared/near.dxf", "deep/../leaf.dxf"])
def test_drawings_within_reach(mail, drawing):
    assert load_job(job_of(mail, drawing)).parts[0].drawing == mail / drawing


@pytest.mark.parametrize("drawing", ["../../secret.dxf", "{root}/secret.dxf", "link.dxf", "/etc/hostname"])
def test_drawings_out_of_reach_need_the_flag(mail, drawing):
    root = mail.parent.parent
    (mail / "link.dxf").symlink_to(root / "secret.dxf")
    path = job_of(mail, drawing.format(root=root))
    with pytest.raises(JobError, match="neither under the job's folder nor beside it") as caught:
        load_job(path)
    assert "--anywhere" in caught.value.remedy
    if not drawing.startswith("/etc"):
        assert load_job(path, JobOptions(anywhere=True)).parts[0].drawing.resolve() == root / "secret.dxf"


def test_links_in_a_ring(mail):
    (mail / "a.dxf").symlink_to("b.dxf")
    (mail / "b.dxf").symlink_to("a.dxf")
    with pytest.raises(JobError):
        load_job(job_of(mail, "a.dxf"))


@pytest.mark.parametrize("what", ["process", "outline", "parts"])
def test_other_files_are_held_to_the_same_reach(mail, what):
    (mail.parent.parent / "x.toml").write_text('kind = "router"\ntool_diameter = 3\n')
    part = '[[part]]\ndrawing = "leaf.dxf"\n'
    text = {
        "process": 'process = "../../x.toml"\n' + part,
        "parts": 'process = "router"\nparts = "../../x.toml"\n' + part,
        "outline": 'process = "router"\n[[stock]]\nname = "r"\nmaterial = "hdpe"\nthickness = 3\n'
        'outline = "../../secret.dxf"\n' + part,
    }[what]
    with pytest.raises(JobError, match="neither under"):
        load_job(write_job(mail, text))


def test_mistakes_in_a_process_file_of_the_job_are_its_own(mail):
    (mail / "mine.toml").write_text('kind = "router"\n')
    with pytest.raises(FlatprepError, match=r"mine\.toml: tool_diameter is missing"):
        load_job(write_job(mail, 'process = "mine.toml"\n[[part]]\ndrawing = "leaf.dxf"\n'))
