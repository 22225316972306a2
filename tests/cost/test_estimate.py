"""Estimates: masses per set, the bill of the sheets shared out to the cent, and what is not known."""

from decimal import Decimal

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.base.errors import JobError
from flatprep.cost.estimate import Ask, Costed, estimate
from flatprep.job.terms import CostTerms, Discount, Share
from flatprep.profile.material_load import load_material
from flatprep.profile.process_load import load_process, parse_process
from tests.cost.shapes import disc, layout, rectangle, sheet, stock

LASER = load_process("fibre-laser")
STEEL = load_material("mild-steel")


def costed(part, quantity=1, material="mild-steel", thickness=3.0, process=LASER, removed=0.0):
    return Costed(part, quantity, load_material(material) if material else None, thickness, process, removed)


ABC = [costed(rectangle(n, w, 100.0)) for n, w in (("a", 20.0), ("b", 30.0), ("c", 50.0))]
SHEET = stock("s3", "100.00")


def test_shares_by_net_area():
    # sheet of 100.00, net areas 2 : 3 : 5 -> 20.00, 30.00, 50.00 (arithmetic)
    e = estimate(ABC, [SHEET], layout(sheet(SHEET, "a", "b", "c")), Ask(currency="EUR"))
    assert [p.line_cost for p in e.parts] == [Decimal("20.00"), Decimal("30.00"), Decimal("50.00")]
    assert [p.material_cost for p in e.parts] == pytest.approx([20.0, 30.0, 50.0])
    assert (e.material_cost, e.currency) == (Decimal("100.00"), "EUR")
    assert e.utilisation == e.stock[0].utilisation == pytest.approx(10000.0 / 500000.0)
    assert (e.stock[0].name, e.stock[0].count, e.stock[0].price, e.stock[0].cost) == (
        "s3",
        1,
        Decimal(100),
        Decimal(100),
    )


def test_figures_of_one_piece_are_exact():
    # a disc of 100 with a bore of 20: pi (50^2 - 10^2), 2 pi (50 + 10), two contours; 7850 kg/m3 by 3 mm
    e = estimate([costed(disc("d", 100.0, 20.0), 4)])
    d = e.parts[0]
    assert d.area_mm2 == pytest.approx(2400.0 * 3.141592653589793, rel=1e-12)
    assert d.cut_length_mm == pytest.approx(120.0 * 3.141592653589793, rel=1e-12)
    assert d.pierces == 2
    assert d.mass_kg == pytest.approx(2400.0 * 3.141592653589793 * 3.0 * 7850e-9, rel=1e-12)
    assert e.mass_kg == pytest.approx(4 * d.mass_kg, rel=1e-12)


def test_masses_are_those_of_one_set():
    e = estimate([costed(rectangle("a", 100.0, 100.0), 12), costed(rectangle("b", 200.0, 100.0), 6)], ask=Ask(sets=6))
    one = 100.0 * 100.0 * 3.0 * 7850e-9
    assert e.mass_kg == pytest.approx(2 * one + 2 * one)
    assert [p.mass_share for p in e.parts] == pytest.approx([0.5, 0.5])


def test_bench_work_is_taken_off():
    e = estimate([costed(rectangle("a", 100.0, 100.0), removed=1000.0)])
    assert (e.parts[0].mass_kg, e.mass_kg) == pytest.approx((30000.0 * 7850e-9, 30000.0 * 7850e-9))
    done = (30000.0 - 1000.0) * 7850e-9
    assert (e.parts[0].finished_mass_kg, e.finished_mass_kg) == pytest.approx((done, done))
    sets = estimate([costed(rectangle("a", 100.0, 100.0), 6, removed=1000.0)], ask=Ask(sets=2))
    assert sets.finished_mass_kg == pytest.approx(3 * done)


@pytest.mark.parametrize(
    ("limit", "words"),
    [
        # the part weighs 100 x 100 x 3 x 7850e-9 = 0.2355 kg
        (0.2, "broken by 0.0355 kg"),
        (0.25, "nearly reached: 0.0145 kg left"),
        (0.5, None),
        (None, None),
    ],
)
def test_the_mass_limit_is_warned_of_before_it_breaks(limit, words):
    e = estimate([costed(rectangle("a", 100.0, 100.0))], ask=Ask(mass_limit_kg=limit))
    said = [note for note in e.notes if "mass limit" in note]
    assert (words in said[0]) if words else not said
    assert e.mass_left_kg == (None if limit is None else pytest.approx(limit - 0.2355))


def test_without_a_layout_no_cost_is_known():
    e = estimate(ABC, [SHEET])
    assert (e.material_cost, e.utilisation, e.stock) == (None, None, ())
    assert (e.credits, e.discount_percent) == (0, 0)
    assert all(p.line_cost is None and p.material_cost is None for p in e.parts)
    assert "material cost not known: no layout" in e.notes


def test_without_a_price_no_cost_is_made_up():
    unpriced = stock("al3", None, "al-5052-h32")
    items = [*ABC, costed(rectangle("leaf", 50, 50), material="al-5052-h32")]
    e = estimate(items, [SHEET, unpriced], layout(sheet(SHEET, "a", "b", "c"), sheet(unpriced, "leaf")))
    assert e.material_cost is None
    assert [p.line_cost for p in e.parts[:3]] == [Decimal("20.00"), Decimal("30.00"), Decimal("50.00")]
    assert e.parts[3].line_cost is None
    assert any("no price given for stock al3" in note for note in e.notes)


def test_a_price_of_nothing_is_a_price():
    rest = stock("rest", "0")
    e = estimate(ABC, [rest], layout(sheet(rest, "a", "b", "c")))
    assert e.material_cost == Decimal("0.00")
    assert e.parts[0].line_cost == Decimal("0.00")


def test_without_density_or_thickness_no_mass_is_known():
    e = estimate([costed(rectangle("a", 10, 10)), costed(rectangle("b", 10, 10), material=None)])
    assert e.parts[0].mass_kg is not None
    assert (e.parts[1].mass_kg, e.mass_kg) == (None, None)
    assert any("mass not known" in note and "b" in note for note in e.notes)
    assert estimate([costed(rectangle("a", 10, 10), thickness=None)]).mass_kg is None


@pytest.mark.parametrize(("count", "words"), [(6, "p0, p1, p2, p3, p4, p5"), (8, "p0, p1, p2, p3, p4, p5 and 2 more")])
def test_long_lists_of_names_are_cut_short(count, words):
    e = estimate([costed(rectangle(f"p{n}", 10, 10), material=None) for n in range(count)])
    assert e.notes[0] == f"mass not known, for want of thickness or density: {words}"


def test_materials_and_thicknesses_bear_their_own_sheets():
    thick = stock("s6", "200", thickness=6.0)
    items = [*ABC, costed(rectangle("d", 10, 10), thickness=6.0)]
    e = estimate(items, [SHEET, thick], layout(sheet(SHEET, "a", "b", "c"), sheet(thick, "d")))
    assert e.parts[3].line_cost == Decimal("200.00")
    assert sum(p.line_cost for p in e.parts) == e.material_cost == Decimal("300.00")


def test_open_stock_is_charged_by_the_length_taken():
    # 1234.5 mm of 8.00 a metre: 9.876, rounded half up once: 9.88
    strip = stock("strip", length=None, metre="8.00")
    e = estimate(ABC, [strip], layout(sheet(strip, "a", "b", "c", used=1234.5)))
    assert e.material_cost == Decimal("9.88")
    assert (e.stock[0].length_mm, e.stock[0].price) == (1234.5, Decimal("8.00"))


def test_lengths_may_come_as_numpy_has_them():
    strip = stock("strip", length=None, metre="8.00")
    e = estimate(ABC, [strip], layout(sheet(strip, "a", "b", "c", used=np.float64(1234.5))))
    assert e.material_cost == Decimal("9.88")


def test_remnants_count_with_their_holes_and_empty_sheets_not_at_all():
    e = estimate(ABC, [SHEET], layout(sheet(SHEET, "a", "b", "c"), sheet(SHEET)))
    assert (e.stock[0].count, e.material_cost) == (1, Decimal("100.00"))


def test_the_largest_amounts_keep_their_cents():
    dear = stock("dear", "999999999999.99")
    sheets = [sheet(dear, "a", "b", "c") for _ in range(20)]
    e = estimate([costed(i.part, 20) for i in ABC], [dear], layout(*sheets))
    assert e.material_cost == sum(p.line_cost for p in e.parts) == Decimal("19999999999999.80")


def test_pieces_without_a_place_are_said():
    items = [costed(rectangle("a", 20, 100), 3), costed(rectangle("b", 20, 100), 1)]
    e = estimate(items, [SHEET], layout(sheet(SHEET, "a", "a")))
    assert [p.line_cost for p in e.parts] == [Decimal("100.00"), None]
    assert any("a (1 of 3)" in note and "b (1 of 1)" in note for note in e.notes)


@pytest.mark.parametrize(
    ("rule", "lines"),
    [
        # a: 100 x 100 less a hole of 80; b: 100 x 50, so boxes 2 : 1, net 4973.45 : 5000, lengths along x 1 : 1
        (Share.NET_AREA, ["49.87", "50.13"]),
        (Share.BOX_AREA, ["66.67", "33.33"]),
        (Share.USED_LENGTH, ["50.00", "50.00"]),
    ],
)
def test_rules_of_sharing(rule, lines):
    items = [costed(rectangle("a", 100, 100, [(50, 50, 80)])), costed(rectangle("b", 100, 50))]
    e = estimate(items, [SHEET], layout(sheet(SHEET, "a", "b")), Ask(terms=CostTerms(share=rule)))
    assert [str(p.line_cost) for p in e.parts] == lines
    assert e.share == rule
    assert any("shared out by" in note for note in e.notes)


def test_discount_of_the_highest_amount_reached():
    terms = CostTerms(discounts=(Discount(Decimal(50), Decimal(2)), Discount(Decimal(100), Decimal("7.5"))))
    e = estimate(ABC, [SHEET], layout(sheet(SHEET, "a", "b", "c")), Ask(terms=terms))
    assert (e.material_cost, e.discount_percent) == (Decimal("92.50"), Decimal("7.5"))
    low = stock("s3", "99.99")
    e = estimate(ABC, [low], layout(sheet(low, "a", "b", "c")), Ask(terms=terms))
    assert e.material_cost == Decimal("97.99")  # 99.99 less 2 % is 97.9902


def test_usable_rests_are_credited():
    # 600 of 1000 mm left at half price: 100 x 0.5 x 0.6 = 30
    terms = CostTerms(offcut_credit=Decimal("0.5"), offcut_least_mm=(300.0, 300.0))
    e = estimate(ABC, [SHEET], layout(sheet(SHEET, "a", "b", "c", used=400.0)), Ask(terms=terms))
    assert (e.material_cost, e.credits) == (Decimal("70.00"), Decimal("30.00"))
    assert sum(p.line_cost for p in e.parts) == e.material_cost
    short = estimate(ABC, [SHEET], layout(sheet(SHEET, "a", "b", "c", used=701.0)), Ask(terms=terms))
    assert short.credits == 0  # 299 mm is less than the smallest usable rest


def test_scrap_is_credited_by_weight_for_metals_only():
    # skeleton (500000 - 10000) x 3 x 7850e-9 = 11.5395 kg at 0.30: 3.46185
    terms = CostTerms(scrap_per_kg=Decimal("0.30"))
    e = estimate(ABC, [SHEET], layout(sheet(SHEET, "a", "b", "c")), Ask(terms=terms))
    assert e.material_cost == Decimal("96.54")
    board = stock("ply", "100", "birch-ply")
    items = [costed(rectangle("a", 20, 100), material="birch-ply")]
    assert estimate(items, [board], layout(sheet(board, "a")), Ask(terms=terms)).material_cost == Decimal("100.00")


def test_credits_never_make_a_bill_negative():
    terms = CostTerms(scrap_per_kg=Decimal(1000))
    e = estimate(ABC, [SHEET], layout(sheet(SHEET, "a", "b", "c")), Ask(terms=terms))
    assert e.material_cost == 0
    assert all(p.line_cost == 0 for p in e.parts)


def test_cutting_time_and_machine_cost():
    # 240 mm at 1200 mm/min are 12 s, one pierce 1 s; three pieces 39 s; 60 an hour: 0.65
    feeds = {"low-carbon-steel": {"feed_mm_min": [[1, 1200], [6, 1200]], "pierce_s": [[1, 1], [6, 1]]}}
    laser = parse_process({"kind": "laser", "kerf": 0.2, "family": feeds}, "p.toml", "p")
    items = [costed(rectangle("a", 20, 100), 3, process=laser)]
    e = estimate(items, ask=Ask(terms=CostTerms(machine_rate=Decimal(60))))
    assert (e.parts[0].cut_time_s, e.cut_time_s) == (pytest.approx(13.0), pytest.approx(39.0))
    assert e.machine_cost == Decimal("0.65")
    assert estimate(items).machine_cost is None
    many = [costed(rectangle("a", 20, 100), 30000, process=laser)]
    assert estimate(many, ask=Ask(terms=CostTerms(machine_rate=Decimal(60)))).machine_cost == Decimal("6500.00")
    own = parse_process({"kind": "laser", "kerf": 0.2, "family": feeds, "machine_rate": 120}, "p.toml", "p")
    assert estimate([costed(rectangle("a", 20, 100), 3, process=own)]).machine_cost == Decimal("1.30")


def test_without_feeds_the_time_is_null_and_said():
    e = estimate(ABC)
    assert (e.cut_time_s, e.machine_cost, e.parts[0].cut_time_s) == (None, None, None)
    assert any("no feeds" in note for note in e.notes)


@pytest.mark.parametrize(("used", "of", "words"), [("x", "s3", 'part "x"'), ("a", "other", 'stock "other"')])
def test_a_layout_of_another_job(used, of, words):
    with pytest.raises(JobError, match=words):
        estimate(ABC, [SHEET], layout(sheet(stock(of, "1"), used)))


sizes = st.tuples(st.floats(1.0, 900.0), st.floats(1.0, 400.0), st.integers(1, 9))
prices = st.integers(0, 10**7).map(lambda n: str(Decimal(n) / 1000))


@st.composite
def jobs(draw):
    """Random parts on random sheets of two stocks, one of open length."""
    parts = [rectangle(f"p{n}", w, h) for n, (w, h, _) in enumerate(draw(st.lists(sizes, min_size=1, max_size=12)))]
    stocks = [stock("full", draw(prices)), stock("strip", length=None, metre=draw(prices), thickness=5.0)]
    sheets, items = [], []
    for part in parts:
        of = draw(st.sampled_from(stocks))
        count = draw(st.integers(1, 9))
        items.append(costed(part, count, thickness=of.thickness_mm))
        used = draw(st.floats(10.0, 3000.0)) if of.length_mm is None else None
        sheets.append(sheet(of, *[part.name] * count, used=used))
    return items, stocks, layout(*sheets)


@given(jobs(), st.sampled_from(list(Share)), st.integers(0, 100), st.integers(0, 100))
def test_line_costs_add_up_to_the_bill_to_the_cent(job, rule, percent, credit):
    items, stocks, nest = job
    terms = CostTerms(
        share=rule, discounts=(Discount(Decimal(10), Decimal(percent)),), offcut_credit=Decimal(credit) / 100
    )
    e = estimate(items, stocks, nest, Ask(terms=terms))
    assert sum(p.line_cost for p in e.parts) == e.material_cost
    assert sum(s.cost for s in e.stock) == e.material_cost
    assert all(p.line_cost >= 0 for p in e.parts)
    for part in e.parts:
        assert float(part.line_cost) == pytest.approx(part.material_cost * part.quantity, abs=0.0101 * len(e.parts))


@given(jobs())
def test_more_pieces_never_cost_less(job):
    items, stocks, nest = job
    fewer = layout(*nest.sheets[:-1])
    assert estimate(items, stocks, fewer).material_cost <= estimate(items, stocks, nest).material_cost
