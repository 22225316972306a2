"""The commands that take a job, as a user calls them, on the sample job and on small ones."""

import json
import os
from pathlib import Path

import ezdxf
import numpy as np
import pytest
from click.testing import CliRunner

from flatprep import api
from flatprep.cli.main import root
from tests.drawing.draw import box, drawn

SAMPLE = Path(__file__).parents[2] / "sample_parts" / "job.toml"

JOB = """
name = "seed drill"
process = "fibre-laser"
spacing = 3.0
margin = 5.0
[[stock]]
name = "steel"
material = "mild-steel"
thickness = 3
length = 300
width = 200
count = 1
price_per_sheet = 20.0
[[part]]
drawing = "leaf.dxf"
material = "mild-steel"
thickness = 3
quantity = 4
"""


SHEET_1 = ["sheet-01-rest.dxf", "sheet-01.dxf", "sheet-01.svg"]


def leaf(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_circle((20, 25), 5)


@pytest.fixture
def job(tmp_path):
    drawn(tmp_path, leaf)
    path = tmp_path / "job.toml"
    path.write_text(JOB)
    return path


def run(*words):
    return CliRunner().invoke(root, [str(w) for w in words])


def test_nest_writes_layout_and_sheets(job, tmp_path):
    got = run("nest", job, "--out", tmp_path / "out", "--steps", "20")
    assert got.exit_code == 0, got.output
    layout = json.loads((tmp_path / "out" / "layout.json").read_text())
    assert layout["schema"] == "flatprep-layout/1"
    assert [len(s["placements"]) for s in layout["sheets"]] == [4]
    # net area by hand: 4 x (80 x 50 - pi 25) on 300 x 200
    assert layout["sheets"][0]["utilisation"] == pytest.approx(4 * (4000 - 78.5398163397) / 60000)
    assert layout["parts"][0]["drawing"] == "../leaf.dxf"
    for name in ("sheet-01.dxf", "sheet-01.svg"):
        assert (tmp_path / "out" / name).stat().st_size > 500


def test_same_seed_and_steps_give_the_same_bytes(job, tmp_path):
    for name in ("a", "b"):
        assert run("nest", job, "--out", tmp_path / name, "--steps", "30", "--seed", "7").exit_code == 0
    for file in ("layout.json", "sheet-01.dxf", "sheet-01.svg"):
        assert (tmp_path / "a" / file).read_bytes() == (tmp_path / "b" / file).read_bytes()


def test_part_larger_than_every_sheet(job, tmp_path):
    job.write_text(JOB.replace("width = 200", "width = 40").replace("length = 300", "length = 60"))
    got = run("nest", job, "--out", tmp_path / "out", "--steps", "5")
    assert got.exit_code == 1
    assert "NOT PLACED: 4 x leaf" in got.stdout
    layout = json.loads((tmp_path / "out" / "layout.json").read_text())
    assert [(u["part"], u["count"]) for u in layout["unplaced"]] == [("leaf", 4)]


def test_other_forms_of_a_sheet(job, tmp_path):
    words = ["--also", "cut-only", "--also", "r12", "--also", "kerf"]
    assert run("nest", job, "--out", tmp_path / "out", "--steps", "5", *words).exit_code == 0
    forms = {
        name: ezdxf.readfile(tmp_path / "out" / f"sheet-01{name}.dxf") for name in ("", "-cut-only", "-r12", "-kerf")
    }
    assert all(doc.audit().errors == [] for doc in forms.values())
    assert forms["-r12"].acad_release == "R12"
    assert {e.dxf.layer for e in forms["-cut-only"].modelspace()} == {"CUT"}
    assert {e.dxftype() for e in forms["-r12"].modelspace().query('*[layer=="CUT"]')} == {"POLYLINE", "CIRCLE"}
    drawn = {name: {e.dxf.radius for e in doc.modelspace().query("CIRCLE")} for name, doc in forms.items()}
    assert drawn[""] == drawn["-cut-only"] == drawn["-r12"] == {5.0}
    # a hole is cut on a path half a kerf inside it: the profile's kerf table says 0.2 to 0.3 mm in 3 mm steel
    (inside,) = drawn["-kerf"]
    assert 5.0 - 0.15 <= inside <= 5.0 - 0.1
    run("nest", job, "--out", tmp_path / "out", "--steps", "5")
    assert sorted(p.name for p in (tmp_path / "out").glob("sheet-*")) == SHEET_1


def test_what_is_kept_stays_and_the_rest_is_laid_around_it(job, tmp_path):
    job.write_text(JOB.replace("quantity = 4", "quantity = 2"))
    run("nest", job, "--out", tmp_path / "cut", "--steps", "5")
    before = json.loads((tmp_path / "cut" / "layout.json").read_text())["sheets"][0]["placements"]
    job.write_text(JOB)
    got = run("nest", job, "--out", tmp_path / "out", "--steps", "5", "--keep", tmp_path / "cut" / "layout.json")
    assert got.exit_code == 0, got.output
    after = json.loads((tmp_path / "out" / "layout.json").read_text())["sheets"][0]["placements"]
    where = [{k: p[k] for k in ("turn_deg", "mirrored", "dx", "dy")} for p in after]
    assert len(after) == 4
    assert all({k: p[k] for k in ("turn_deg", "mirrored", "dx", "dy")} in where for p in before)


def test_kept_by_hand_onto_each_other_is_named(job, tmp_path):
    run("nest", job, "--out", tmp_path / "out", "--steps", "5")
    path = tmp_path / "out" / "layout.json"
    layout = json.loads(path.read_text())
    for placement in layout["sheets"][0]["placements"]:
        placement.update(turn_deg=0.0, dx=20.0, dy=20.0)
    path.write_text(json.dumps(layout))
    got = run("nest", job, "--out", tmp_path / "again", "--steps", "5", "--keep", path)
    assert got.exit_code == 2
    assert "leaf" in got.stderr


def test_what_is_left_of_a_sheet_can_be_stock_next_time(job, tmp_path):
    run("nest", job, "--out", tmp_path / "out", "--steps", "5")
    rest = tmp_path / "out" / "sheet-01-rest.dxf"
    assert ezdxf.readfile(rest).audit().errors == []
    stock = JOB.replace("length = 300\nwidth = 200\n", f'outline = "{rest.relative_to(tmp_path)}"\n')
    job.write_text(stock.replace("quantity = 4", "quantity = 2"))
    got = run("nest", job, "--out", tmp_path / "next", "--steps", "5")
    assert got.exit_code == 0, got.output


def test_fillers_without_a_place_are_said_and_not_missed(job, tmp_path):
    job.write_text(JOB.replace("width = 200", "width = 62").replace("quantity = 4", "quantity = 3"))
    spare = ['drawing = "leaf.dxf"', 'name = "spare"', 'material = "mild-steel"', "thickness = 3", "quantity = 5"]
    job.write_text("\n".join([job.read_text(), "[[part]]", *spare, "filler = true", ""]))
    got = run("nest", job, "--out", tmp_path / "out", "--steps", "5")
    assert got.exit_code == 0, got.output
    assert "NOT PLACED: 5 x spare" in got.stdout


def test_sheets_of_an_earlier_run_do_not_stay(job, tmp_path):
    job.write_text(JOB.replace("count = 1", 'count = "any"').replace("quantity = 4", "quantity = 40"))
    run("nest", job, "--out", tmp_path / "out", "--steps", "5")
    assert (tmp_path / "out" / "sheet-02.dxf").exists()
    job.write_text(JOB)
    run("nest", job, "--out", tmp_path / "out", "--steps", "5")
    assert sorted(p.name for p in (tmp_path / "out").glob("sheet-*")) == SHEET_1


def test_bench_sheets_of_parts_that_are_gone_do_not_stay(job, tmp_path):
    out, spare = tmp_path / "out", '[[part]]\nname = "spare"\n' + JOB[JOB.index("drawing") :]
    job.write_text(JOB + spare)
    assert run("prepare", job, "--out", out, "--steps", "1").exit_code == 0
    (out / "bench" / "notes.txt").write_text("my own")
    assert sorted(p.name for p in (out / "bench").iterdir()) == ["leaf.html", "notes.txt", "spare.html"]
    job.write_text(JOB)
    assert run("prepare", job, "--out", out, "--steps", "1").exit_code == 0
    assert sorted(p.name for p in (out / "bench").iterdir()) == ["leaf.html", "notes.txt"]
    got = run("nest", job, "--out", out, "--steps", "1")
    assert "report.html is of an earlier run" in got.stderr


def test_spacing_below_the_kerf_is_warned_of_and_kept(job, tmp_path):
    job.write_text(JOB.replace("spacing = 3.0", "spacing = 0.0"))
    got = run("nest", job, "--out", tmp_path / "out", "--steps", "5")
    assert "less than the kerf" in got.stderr
    assert json.loads((tmp_path / "out" / "layout.json").read_text())["spacing_mm"] == 0.0


def test_damaged_drawing_costs_itself(job, tmp_path):
    (tmp_path / "bad.dxf").write_text("rubbish")
    job.write_text(JOB + '[[part]]\ndrawing = "bad.dxf"\nmaterial = "mild-steel"\nthickness = 3\nquantity = 2\n')
    got = run("prepare", job, "--out", tmp_path / "out", "--steps", "5")
    assert got.exit_code == 1
    assert "bad" in got.stderr
    layout = json.loads((tmp_path / "out" / "layout.json").read_text())
    assert sum(len(s["placements"]) for s in layout["sheets"]) == 4
    assert [(u["part"], u["count"]) for u in layout["unplaced"]] == [("bad", 2)]
    assert "2 pieces not placed" in got.stdout.splitlines()[-1]


def test_job_without_a_usable_drawing(job, tmp_path):
    (tmp_path / "leaf.dxf").write_text("rubbish")
    for command in (["checklist", job], ["estimate", job], ["nest", job, "--out", tmp_path / "out"]):
        got = run(*command)
        assert got.exit_code == 2
        assert got.stderr.splitlines()[-2 if "try:" in got.stderr.splitlines()[-1] else -1].startswith("error:")


@pytest.mark.skipif(os.geteuid() == 0, reason="root may write everywhere")
def test_read_only_folder(job, tmp_path):
    shut = tmp_path / "shut"
    shut.mkdir(mode=0o555)
    got = run("nest", job, "--out", shut / "out", "--steps", "5")
    assert got.exit_code == 2
    assert "shut" in got.stderr


def test_folder_that_is_a_file(job, tmp_path):
    (tmp_path / "taken").write_text("a file")
    got = run("prepare", job, "--out", tmp_path / "taken", "--steps", "5")
    assert got.exit_code == 2
    assert "taken" in got.stderr
    assert (tmp_path / "taken").read_text() == "a file"


@pytest.mark.parametrize(
    ("wrong", "said"),
    [
        (JOB.replace("spacing", "spaceing"), "spaceing"),
        (JOB.replace("quantity = 4", 'quantity = "many"'), "many"),
        (JOB.replace('"mild-steel"', '"mild-steal"'), "mild-steal"),
        (JOB.replace("thickness = 3", "thickness = -3"), "-3"),
        (JOB.replace("leaf.dxf", "leef.dxf"), "leef.dxf"),
        (JOB + "[[part.work]]\nhole = 6\ntap = 'M8'\n", "6"),
        (JOB + "[[part.work]]\nhole = 10\ntap = 'M7.5'\n", "M7.5"),
    ],
)
def test_mistakes_in_a_job_are_named(job, tmp_path, wrong, said):
    job.write_text(wrong)
    got = run("prepare", job, "--out", tmp_path / "out", "--steps", "5")
    assert got.exit_code in (1, 2)
    assert said in got.stderr
    assert "Traceback" not in got.stderr


def test_estimate_uses_a_given_layout(job, tmp_path):
    run("nest", job, "--out", tmp_path / "out", "--steps", "5")
    got = run("estimate", job, "--layout", tmp_path / "out" / "layout.json", "--format", "json")
    document = json.loads(got.stdout)
    assert got.exit_code == 0
    assert document["material_cost"] == 20.0
    assert sum(p["line_cost"] for p in document["parts"]) == 20.0
    # 7850 kg/m3 x 3 mm x (4000 - pi 25) mm2
    assert document["parts"][0]["mass_kg"] == pytest.approx(7850e-9 * 3 * (4000 - 78.5398163397))


@pytest.mark.parametrize("content", ["", "[]", '{"schema": "flatprep-layout/9"}', '{"schema": "flatprep-layout/1"}'])
def test_layout_that_is_none(job, tmp_path, content):
    (tmp_path / "layout.json").write_text(content)
    got = run("estimate", job, "--layout", tmp_path / "layout.json")
    assert got.exit_code == 2
    assert "layout.json" in got.stderr


def test_prepare_the_sample_job(tmp_path):
    got = run("prepare", SAMPLE, "--out", tmp_path, "--steps", "10")
    assert got.exit_code in (0, 1), got.output
    for name in ("report.html", "layout.json", "lint.json", "checklist.json", "estimate.json", "parts.csv"):
        assert (tmp_path / name).stat().st_size > 100
    cards = json.loads((tmp_path / "estimate.json").read_text())["parts"]
    sheets = {p.stem.removesuffix("-opposite") for p in (tmp_path / "bench").glob("*.html")}
    assert sheets == {p["name"] for p in cards}


def test_python_callers_have_the_same_verbs(job, tmp_path):
    read = api.read_job(api.load_job(job))
    nested = api.nest_job(read, api.Budget(steps=5))
    api.write_layout(nested, tmp_path / "out")
    assert api.estimate_job(read, api.stored_layout(tmp_path / "out" / "layout.json")).material_cost == 20
    assert len(api.checklist_job(read).parts) == 1
    assert "nest_job" in dir(api)
    with pytest.raises(AttributeError, match="cut_job"):
        api.cut_job  # noqa: B018


@pytest.mark.parametrize("by", ["option", "key"])
def test_first_articles_are_told_and_kept_in_the_layout(job, tmp_path, by):
    job.write_text("first_article = true\n" + JOB if by == "key" else JOB)
    got = run("nest", job, "--out", tmp_path / "out", "--steps", "5", *(["--first-article"] if by == "option" else []))
    assert "  first articles, cut first: leaf " in got.stdout
    layout = api.stored_layout(tmp_path / "out" / "layout.json")
    first = [p for p in layout.sheets[0].placements if p.first]
    assert len(first) == 1
    entities = ezdxf.readfile(tmp_path / "out" / "sheet-01.dxf").modelspace().query('CIRCLE[layer=="CUT"]')
    hole = first[0].motion.points(np.array([[20.0, 25.0]]))[0]
    assert (entities[0].dxf.center.x, entities[0].dxf.center.y) == pytest.approx(tuple(hole))


SIZE = "length = 300\nwidth = 200\n"
L_TURNED_OVER = "outline = [[-3, -3], [93, -3], [93, 73], [57, 73], [57, 33], [-3, 33]]\n"
BAD_ASKS = {
    "spacing over the sheet": (
        JOB.replace("spacing = 3.0", "spacing = 400"),
        1,
        ["spacing 400 mm is larger than steel: no two pieces go on one such sheet", "3 x leaf: no room left on steel"],
    ),
    "outline across itself": (
        JOB.replace(SIZE, 'outline = "bow.dxf"\n'),
        2,
        ["stock 'steel': ", "bow.dxf: the remnant's outline crosses itself at (150.00, 100.00)", "one closed outline"],
    ),
    "points across themselves": (
        JOB.replace(SIZE, "outline = [[0, 0], [300, 200], [300, 0], [0, 200]]\n"),
        2,
        ["stock 1 (steel): outline = ", "an outline that does not cross or touch itself"],
    ),
    "grain of a stock without": (
        JOB + 'grain = "x"\n',
        1,
        ["4 x leaf: its grain is to lie along the stock's, but steel states no grain: grain = "],
    ),
    "only turned over": (
        JOB.replace(SIZE, L_TURNED_OVER).replace("leaf.dxf", "hook.dxf")
        .replace("margin = 5.0", "margin = 2.0").replace("quantity = 4", "quantity = 1"),
        1,
        ["1 x hook: fits steel only turned over, which may_flip = true would allow"],
    ),
    "margin over the sheet": (
        JOB.replace("margin = 5.0", "margin = 150"), 1, ["4 x leaf: margin and keep-outs leave nothing of any sheet"]
    ),
}  # fmt: skip


@pytest.mark.parametrize(("text", "status", "said"), BAD_ASKS.values(), ids=BAD_ASKS)
def test_asks_that_cannot_be_met_are_answered_in_clear_words(job, tmp_path, text, status, said):
    drawn(
        tmp_path, lambda msp: msp.add_lwpolyline([(0, 0), (300, 0), (0, 200), (300, 200)], close=True), name="bow.dxf"
    )
    hook = [(0, 0), (90, 0), (90, 30), (30, 30), (30, 70), (0, 70)]
    drawn(tmp_path, lambda msp: msp.add_lwpolyline(hook, close=True), name="hook.dxf")
    job.write_text(text)
    got = run("nest", job, "--out", tmp_path / "out", "--steps", "3")
    assert got.exit_code == status, got.output
    for words in said:
        assert words in got.stdout + got.stderr
