"""``flatprep estimate`` and ``flatprep alternatives``: exit status, JSON on stdout and nothing else, clear errors."""

import json
from math import pi

import ezdxf
import pytest
from click.testing import CliRunner

from flatprep.cli.main import root

JOB = """
process = "fibre-laser"
sets = 2
currency = "EUR"
mass_limit = 0.5
[cost]
breaks = [1, 3]
[[stock]]
name = "al3"
material = "al-5052-h32"
thickness = 3
length = 1000
width = 500
count = 1
price_per_sheet = 40.5
[[part]]
drawing = "leaf.dxf"
material = "al-5052-h32"
thickness = 3
quantity = 1
[[part]]
drawing = "plate.dxf"
material = "al-5052-h32"
thickness = 3
"""


def draw(path, width):
    doc = ezdxf.new("R2010")
    doc.header["$INSUNITS"] = 4
    msp = doc.modelspace()
    msp.add_lwpolyline([(0, 0), (width, 0), (width, 80), (0, 80)], close=True)
    msp.add_circle((30, 30), 5)
    doc.saveas(path)


@pytest.fixture
def job(tmp_path):
    draw(tmp_path / "leaf.dxf", 200)
    draw(tmp_path / "plate.dxf", 100)
    (tmp_path / "job.toml").write_text(JOB)
    placed = [
        {"part": name, "copy": copy, "turn_deg": 0.0, "mirrored": False, "dx": 10.0, "dy": 10.0 + 100.0 * copy}
        for name in ("leaf", "plate")
        for copy in (1, 2)
    ]
    sheet = {
        "file": "sheet-01.dxf", "stock": "al3", "material": "al-5052-h32", "thickness_mm": 3.0,
        "outline": [[0, 0], [1000, 0], [1000, 500], [0, 500]], "holes": [], "used_length_mm": 220.0, "utilisation": 0.1,
        "placements": placed,
    }  # fmt: skip
    layout = {"schema": "flatprep-layout/1", "spacing_mm": 3.0, "margin_mm": 8.0, "parts": [], "sheets": [sheet]}
    (tmp_path / "layout.json").write_text(json.dumps({**layout, "unplaced": []}))
    return tmp_path / "job.toml"


def run(*words):
    return CliRunner().invoke(root, [str(word) for word in words])


def test_estimate_of_a_given_layout(job):
    done = run("estimate", job, "--layout", job.parent / "layout.json", "--format", "json")
    assert done.exit_code == 0
    document = json.loads(done.stdout)
    leaf, plate = document["parts"]
    # 200 x 80 and 100 x 80, each less a hole of 10; 2680 kg/m3 by 3 mm
    assert leaf["area_mm2"] == pytest.approx(16000 - 25 * pi, rel=1e-12)
    assert leaf["mass_kg"] == pytest.approx((16000 - 25 * pi) * 3 * 2680e-9, rel=1e-12)
    assert (leaf["quantity"], leaf["pierces"], leaf["cut_length_mm"]) == (2, 2, pytest.approx(560 + 10 * pi, rel=1e-12))
    assert leaf["line_cost"] + plate["line_cost"] == document["material_cost"] == 40.5
    assert document["mass_kg"] == pytest.approx(leaf["mass_kg"] + plate["mass_kg"], rel=1e-12)
    assert document["utilisation"] == pytest.approx(2 * (24000 - 50 * pi) / 500000)
    assert document["mass_limit_kg"] == 0.5


def test_estimate_as_text_and_csv(job):
    layout = job.parent / "layout.json"
    text = run("estimate", job, "--layout", layout)
    assert text.exit_code == 0
    assert "40.50" in text.stdout
    table = run("estimate", job, "--layout", layout, "--format", "csv")
    assert table.stdout.splitlines()[1].startswith("leaf,al-5052-h32,3.0,2,")


@pytest.mark.parametrize(
    ("old", "new", "words"),
    [
        ("price_per_sheet = 40.5", 'price_per_sheet = "cheap"', "price_per_sheet"),
        ("price_per_sheet = 40.5", "price_per_sheet = -1", "price_per_sheet = -1"),
        ('currency = "EUR"', 'currency = "Euros"', "currency"),
        ("sets = 2", "sts = 2", "unknown key sts"),
        ('material = "al-5052-h32"', 'material = "unobtainium"', "unknown material"),
    ],
)
def test_wrong_prices_and_the_like(job, old, new, words):
    job.write_text(JOB.replace(old, new, 1))
    done = run("estimate", job)
    assert done.exit_code == 2
    assert words in done.stderr
    assert done.stdout == ""


def test_a_layout_of_another_job(job):
    layout = job.parent / "layout.json"
    layout.write_text(layout.read_text().replace('"plate"', '"other"'))
    done = run("estimate", job, "--layout", layout)
    assert done.exit_code == 2
    assert 'part "other" is not in this job' in done.stderr


def test_alternatives(job):
    done = run("alternatives", job, "--part", "leaf", "--try", "S235", "--try", "acrylic", "--format", "json")
    assert done.exit_code == 0
    document = json.loads(done.stdout)
    assert [part["part"] for part in document["parts"]] == ["leaf"]
    options = {(o["basis"], o["material"]): o for o in document["parts"][0]["options"]}
    steel = options["stiffness", "mild-steel"]
    # 3 (70.3 / 210)^(1/3) = 3 x 0.69435 = 2.08305: sold as 2.5
    assert (steel["needed_mm"], steel["thickness_mm"]) == (pytest.approx(2.08305, abs=1e-5), 2.5)
    assert (steel["process"], steel["findings"]) == ("fibre-laser", [])
    assert options["same-thickness", "acrylic"]["process"] in ("co2-laser", "router")


def test_alternatives_put_lint_to_work(job):
    # a hole of 10 mm is one thickness of 10 mm plate, less than the least of 12 mm plate (fibre laser, steel)
    job.write_text(JOB.replace("thickness = 3", "thickness = 10"))
    done = run("alternatives", job, "--part", "leaf", "--try", "S235", "--format", "json")
    options = json.loads(done.stdout)["parts"][0]["options"]
    thick = next(o for o in options if o["basis"] == "strength" and o["material"] == "mild-steel")
    assert thick["thickness_mm"] == 10.0  # 10 (193 / 235)^(1/2) = 9.06
    assert thick["findings"] == []
    wear = run("alternatives", job, "--part", "leaf", "--try", "wear-plate-500", "--format", "json")
    options = json.loads(wear.stdout)["parts"][0]["options"]
    same = next(o for o in options if o["basis"] == "same-thickness" and o["material"] == "wear-plate-500")
    assert same["findings"] == ["small-hole"]  # 10 mm under the warning level of 1.2 thicknesses


def test_alternatives_of_an_inch_job_are_sold_by_inches(job):
    text = JOB.replace('process = "fibre-laser"', 'process = "fibre-laser"\nunits = "in"').replace(
        "= 3\n", '= "11ga"\n'
    )
    job.write_text(text.replace("1000", "96").replace("500", "48"))
    done = run("alternatives", job, "--part", "leaf", "--try", "S235", "--format", "json")
    options = json.loads(done.stdout)["parts"][0]["options"]
    # 11 gauge aluminium is 0.0907 in; steel as stiff needs 0.0630: 14 gauge, 0.0747 in (16 gauge is 0.0598)
    stiff = next(o for o in options if o["basis"] == "stiffness" and o["material"] == "mild-steel")
    assert stiff["thickness_mm"] == pytest.approx(0.0747 * 25.4)


def test_alternatives_as_text_and_csv(job):
    text = run("alternatives", job, "--layout", job.parent / "layout.json")
    assert text.exit_code == 0
    assert "leaf: al-5052-h32" in text.stdout
    assert "utilisation as now" in text.stdout
    table = run("alternatives", job, "--format", "csv")
    assert table.stdout.startswith("part,basis,")


@pytest.mark.parametrize(
    ("words", "said"),
    [(("--part", "leef"), 'did you mean "leaf"'), (("--try", "unobtainium"), 'unknown material "unobtainium"')],
)
def test_alternatives_asked_for_nonsense(job, words, said):
    done = run("alternatives", job, *words)
    assert done.exit_code == 2
    assert said in done.stderr
