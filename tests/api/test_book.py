"""Booking the sheets of a layout out of a rack."""

import json
import re
import shutil
import tomllib
from datetime import date

import numpy as np
import pytest
from shapely.geometry import Polygon

from flatprep.api.book import BookAsk, book
from flatprep.api.nest import nest_job
from flatprep.api.pieces import read_job
from flatprep.api.remnants import with_remnants
from flatprep.api.sheets import write_layout
from flatprep.base.errors import DrawingError, JobError, UsageError
from flatprep.job.booked import load_bookings
from flatprep.job.load import load_job
from flatprep.model.booked import Taken
from flatprep.nest.problem import Budget
from flatprep.report.book_text import book_text
from tests.api.test_remnants import SAID, remnant
from tests.cli.test_money import draw

JOB = """
name = "gate"
revision = "C"
process = "fibre-laser"
spacing = 4
margin = 5
rack = "rack"
[[stock]]
name = "own"
material = "mild-steel"
thickness = 6
length = 500
width = 300
margins = [2, 2, 2, 2]
[[part]]
drawing = "leaf.dxf"
material = "mild-steel"
thickness = 3
quantity = 16
[[part]]
drawing = "foot.dxf"
material = "mild-steel"
thickness = 6
"""
LIST = """
[[stock]]
name = "plate"   # from the yard
material = "mild-steel"
thickness = 3
length = 400
width = 300
count = 2        # counted
grain = "width"
"""
DAY = date(2026, 3, 14)


@pytest.fixture(scope="module")
def shop(tmp_path_factory):
    """A workshop whose job takes a remnant, two sheets of the rack and one of its own."""
    folder = tmp_path_factory.mktemp("shop")
    (folder / "rack").mkdir()
    draw(folder / "leaf.dxf", 100)
    draw(folder / "foot.dxf", 120)
    remnant(folder / "rack", "odd.dxf", *SAID, "label: R0007", corners=((0, 0), (120, 0), (120, 220), (0, 220)))
    (folder / "rack" / "stock.toml").write_text(LIST)
    (folder / "job.toml").write_text(JOB)
    write_layout(nested(folder), folder / "out")
    return folder


def nested(folder):
    return nest_job(read_job(load_job(folder / "job.toml")), Budget(steps=3))


@pytest.fixture
def bench(shop, tmp_path):
    shutil.copytree(shop, tmp_path / "shop")
    return tmp_path / "shop"


def ask(bench, **more):
    return BookAsk(bench / "out" / "layout.json", bench / "rack", DAY, **more)


def state(folder):
    return {p.relative_to(folder).as_posix(): p.read_bytes() for p in folder.rglob("*") if p.is_file()}


def change(bench, work):
    """Change the layout by hand."""
    path = bench / "out" / "layout.json"
    data = json.loads(path.read_text())
    work(data)
    path.write_text(json.dumps(data))


def listed(rack, old, new):
    (rack / "stock.toml").write_text(LIST.replace(old, new))


def test_what_was_used_is_gone_and_what_is_left_is_there(bench):
    job = (bench / "job.toml").read_bytes()
    done = book(ask(bench))
    taken = [(s.stock, s.taken, s.left) for s in done.sheets]
    assert sorted(taken) == [
        ("R0007", Taken.REMNANT, None), ("own", Taken.OWN, None), ("plate", Taken.COUNTED, 0),
        ("plate", Taken.COUNTED, 1),
    ]  # fmt: skip
    assert (bench / "job.toml").read_bytes() == job
    assert "count = 0        # counted" in (bench / "rack" / "stock.toml").read_text()
    offcuts = [s.offcut for s in done.sheets if s.offcut]
    assert [o.label for o in offcuts] == [f"R{n:04d}" for n in range(8, 8 + len(offcuts))]  # R0007 was there before
    names = {"stock.toml", "booked.toml", "used/odd.dxf", *(f"{o.label}.dxf" for o in offcuts)}
    assert set(state(bench / "rack")) == names
    assert [(b.day, b.job, b.sheet, b.stock) for b in load_bookings(bench / "rack")] == [
        (DAY, "gate C", s.number, s.stock) for s in done.sheets
    ]


def test_offcuts_are_stock_of_the_next_job_and_nothing_is_used_twice(bench):
    done = book(ask(bench))
    shelf = with_remnants(read_job(load_job(bench / "job.toml")))[1]
    assert (shelf.warnings, shelf.notes) == ((), ())
    labels = {s.offcut.label: s for s in done.sheets if s.offcut}
    assert {s.name for s in shelf.stock} == set(labels)
    for one in shelf.stock:
        sheet = labels[one.name]
        x0, y0, x1, y1 = Polygon(one.outline).bounds
        assert (x0, y0) == pytest.approx((0.0, 0.0), abs=1e-6)
        assert min(x1, y1) >= min(sheet.offcut.length_mm, sheet.offcut.width_mm)
        assert one.thickness_mm == sheet.offcut.thickness_mm
        assert one.grain == ("width" if sheet.stock == "plate" else None)
    (bench / "job.toml").write_text(JOB.replace("quantity = 16", "quantity = 2"))
    again = nested(bench)
    assert {s.stock for s in again.layout.sheets} <= {*labels, "own"}


def test_a_second_time_is_refused_unless_it_was_cut_again(bench):
    change(
        bench, lambda data: data["sheets"].pop(next(n for n, s in enumerate(data["sheets"]) if s["stock"] == "R0007"))
    )
    change(bench, lambda data: data["unplaced"].append({"part": "leaf", "count": lost(data), "why": "cut by hand"}))
    book(ask(bench))
    before = state(bench / "rack")
    with pytest.raises(UsageError, match=r"booked already: sheet-01 \(2026-03-14\)") as err:
        book(ask(bench))
    assert "--again" in err.value.remedy
    # a piece moved by hand makes no other layout of it
    layout = (bench / "out" / "layout.json").read_text()
    change(bench, lambda data: data["sheets"][-1]["placements"][0].update(dx=123.0))
    with pytest.raises(UsageError, match="booked already"):
        book(ask(bench))
    (bench / "out" / "layout.json").write_text(layout)
    with pytest.raises(UsageError, match="takes more sheets of 'plate' than the 0 that are left"):
        book(ask(bench, again=True))
    assert state(bench / "rack") == before
    own = next(b.sheet for b in load_bookings(bench / "rack") if b.stock == "own")
    assert book(ask(bench, again=True, sheets=(own,))).sheets[0].taken is Taken.OWN


def lost(data):
    return 16 - sum(p["part"] == "leaf" for s in data["sheets"] for p in s["placements"])


def test_sheets_may_be_booked_one_by_one(bench):
    first = book(ask(bench, sheets=(2,)))
    assert [s.number for s in first.sheets] == [2]
    with pytest.raises(UsageError, match=r"booked already: sheet-02") as err:
        book(ask(bench))
    assert "--sheet 1 --sheet 3 --sheet 4" in err.value.remedy
    rest = book(ask(bench, sheets=(4, 1, 3, 3)))
    assert [s.number for s in rest.sheets] == [1, 3, 4]
    with pytest.raises(UsageError, match="no sheet 5"):
        book(ask(bench, sheets=(5,)))


def test_a_layout_made_after_a_booking_is_another_one(bench):
    """The same pieces on the same stock, but cut after: not the same sheets."""
    (bench / "rack" / "stock.toml").write_text(LIST.replace("count = 2", "count = 9") + "\n")
    (bench / "rack" / "odd.dxf").unlink()
    (bench / "job.toml").write_text(JOB.replace("quantity = 16", "quantity = 9"))
    kept = "offcut_least = [900, 900]\n"
    (bench / "rack" / "stock.toml").write_text(kept + (bench / "rack" / "stock.toml").read_text())
    for left in (8, 7):
        write_layout(nested(bench), bench / "out")
        done = book(ask(bench))
        assert [(s.stock, s.left, s.offcut) for s in done.sheets if s.stock == "plate"] == [("plate", left, None)]


def test_an_unsound_layout_changes_nothing(bench):
    before = state(bench / "rack")

    def onto_each_other(data):
        first, second = data["sheets"][0]["placements"][:2]
        second.update({key: first[key] for key in ("dx", "dy", "turn_deg")})

    saved = (bench / "out" / "layout.json").read_text()
    change(bench, onto_each_other)
    with pytest.raises(UsageError, match=r"not sound: sheet 1: .* overlap"):
        book(ask(bench))
    (bench / "out" / "layout.json").write_text(saved)
    draw(bench / "leaf.dxf", 101)
    with pytest.raises(UsageError, match="not sound"):
        book(ask(bench))
    draw(bench / "leaf.dxf", 20)
    with pytest.raises(DrawingError, match="no part at"):
        book(ask(bench))
    assert state(bench / "rack") == before


@pytest.mark.parametrize(
    ("spoil", "words"),
    [
        (lambda rack: (rack / "odd.dxf").unlink(), "odd.dxf: not in the rack any more; sheet-0. was laid on it"),
        (lambda rack: remnant(rack, "odd.dxf", *SAID), "is not the outline any more"),
        (lambda rack: listed(rack, "count = 2", "count = 1"), "than the 1 that are left"),
        (lambda rack: listed(rack, '"plate"', '"plates"'), "has no stock 'plate' any more"),
        (lambda rack: listed(rack, "count = 2", "count = 0x2"), "cannot be changed"),
        (lambda rack: (rack / "booked.toml").write_text("[[booked]]\nsheet = 1\n"), "booked 1: date = missing"),
    ],
    ids=["gone", "other", "fewer", "renamed", "odd-count", "bad-book"],
)  # fmt: skip
def test_a_rack_that_has_changed_since(bench, spoil, words):
    spoil(bench / "rack")
    before = state(bench / "rack")
    with pytest.raises((UsageError, JobError), match=words):
        book(ask(bench))
    assert state(bench / "rack") == before


def test_drawings_of_the_same_name_all_stay(bench):
    (bench / "rack" / "used").mkdir()
    (bench / "rack" / "used" / "odd.dxf").write_text("an older one")
    book(ask(bench))
    assert (bench / "rack" / "used" / "odd.dxf").read_text() == "an older one"
    assert (bench / "rack" / "used" / "odd (2).dxf").exists()


def test_what_is_said(bench):
    words = book_text(book(ask(bench)))
    assert "R0007: used up" in words
    assert re.search(r"plate: one taken, 0 left; offcut R\d{4}\n", words)
    assert "own: stock of the job, not of the rack: mind its count there" in words
    added = len(set(re.findall(r"offcut R\d{4}", words)))
    assert words.endswith(f"4 sheets booked, {added} offcuts added to {bench / 'rack'}")


def test_an_empty_rack_may_begin_with_offcuts(bench):
    """A layout made without a rack: nothing to take, its rests are put in."""
    change(bench, lambda data: [data.pop(k) for k in ("rack", "rack_bookings")])
    change(bench, lambda data: [s.pop("rack_file", None) for s in data["sheets"]])
    done = book(BookAsk(bench / "out" / "layout.json", bench / "fresh", DAY))
    assert {s.taken for s in done.sheets} == {Taken.OWN}
    data = tomllib.loads((bench / "fresh" / "booked.toml").read_text())
    assert len(data["booked"]) == len(done.sheets)
    assert np.all([(bench / "fresh" / f"{s.offcut.label}.dxf").exists() for s in done.sheets if s.offcut])
