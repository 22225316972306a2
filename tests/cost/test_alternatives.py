"""What else a part could be made of, against textbook ratios and a worked example."""

import json
from dataclasses import replace
from decimal import Decimal
from importlib.resources import files

import jsonschema
import pytest

from flatprep.cost.alternatives import Choice, alternatives, next_stock_mm, stiffness_ratio, strength_ratio
from flatprep.cost.alternatives_job import job_alternatives
from flatprep.cost.breaks import quantity_breaks
from flatprep.cost.estimate import Ask, Costed, estimate
from flatprep.cost.prices import price_per_kg, priced
from flatprep.model.alternative import Basis
from flatprep.profile.material_load import load_material
from flatprep.profile.process_load import load_process
from flatprep.report.alternatives_json import alternatives_csv, alternatives_document
from flatprep.report.alternatives_text import alternatives_text
from tests.cost.shapes import layout, rectangle, sheet, stock
from tests.reference_tables import table

LASER, ROUTER = load_process("fibre-laser"), load_process("router")
STEEL = replace(load_material("mild-steel"), e_gpa=210.0, strength_mpa=240.0)
ALU = replace(
    load_material("al-6061-t6"), e_gpa=70.0, strength_mpa=240.0, density_kg_m3=2700.0, stock_mm=(3.0, 4.0, 5.0, 6.0)
)
PLATE = Costed(rectangle("side", 200.0, 100.0), 1, STEEL, 4.0, LASER)


def option(found, basis, material="al-6061-t6"):
    return next(o for o in found.options if o.basis is basis and o.material == material)


@pytest.mark.parametrize("row", table("alternatives")["stiffness"], ids=lambda r: r["name"])
def test_equal_stiffness(row):
    assert stiffness_ratio(row["e0"], row["e"]) == pytest.approx(row["ratio"], abs=1e-4)


@pytest.mark.parametrize("row", table("alternatives")["strength"], ids=lambda r: r["name"])
def test_equal_strength(row):
    assert strength_ratio(row["s0"], row["s"]) == pytest.approx(row["ratio"], abs=1e-9)


def test_steel_to_aluminium_with_the_shipped_figures():
    # textbook: aluminium of the same stiffness is 1.44 times as thick and about half as heavy
    steel, alu = load_material("mild-steel"), load_material("al-5052-h32")
    ratio = stiffness_ratio(steel.e_gpa, alu.e_gpa)
    assert ratio == pytest.approx(1.44, abs=0.005)
    assert ratio * alu.density_kg_m3 / steel.density_kg_m3 == pytest.approx(0.49, abs=0.01)


def test_a_worked_example():
    """200 x 100 x 4 of steel: 0.628 kg.

    As stiff in aluminium (E a third): 4 x 1.4422 = 5.77, sold as 6: 0.324 kg, 0.516 of the mass; it deflects
    3 (4/6)^3 = 0.889 as much and bears (6/4)^2 = 2.25 as much. As strong at the same strength: 4 mm, 0.216 kg.
    """
    found = alternatives(PLATE, Choice((STEEL, ALU)))
    assert found.mass_kg == pytest.approx(0.628)
    stiff = option(found, Basis.STIFFNESS)
    assert stiff.needed_mm == pytest.approx(5.76900, abs=1e-5)
    assert (stiff.thickness_mm, stiff.process) == (6.0, "fibre-laser")
    assert stiff.mass_kg == pytest.approx(0.324)
    assert stiff.mass_ratio == pytest.approx(0.324 / 0.628)
    assert stiff.deflection_ratio == pytest.approx(3.0 * (4.0 / 6.0) ** 3)
    assert stiff.strength_ratio == pytest.approx(2.25)
    strong = option(found, Basis.STRENGTH)
    assert (strong.needed_mm, strong.thickness_mm) == (pytest.approx(4.0), 4.0)
    same = option(found, Basis.SAME_THICKNESS)
    assert same.deflection_ratio == pytest.approx(3.0)
    assert same.mass_kg == pytest.approx(0.216)


def test_the_same_material_thinner_and_thicker():
    found = alternatives(PLATE, Choice((STEEL,)))
    assert [(o.basis, o.thickness_mm) for o in found.options] == [
        (Basis.SAME_MATERIAL, t) for t in (2.5, 3.0, 5.0, 6.0)
    ]
    assert option(found, Basis.SAME_MATERIAL, "mild-steel").deflection_ratio == pytest.approx((4.0 / 2.5) ** 3)


def test_a_plastic_part_is_no_metal_part_of_the_same_thickness():
    acrylic = replace(load_material("acrylic"), e_gpa=3.0)
    found = alternatives(PLATE, Choice((acrylic,), (load_process("co2-laser"),)))
    same = option(found, Basis.SAME_THICKNESS, "acrylic")
    assert same.deflection_ratio == pytest.approx(70.0)  # E 210 over 3
    assert same.process == "co2-laser"
    # 4 x 70^(1/3) = 16.49 mm: nothing so thick is sold
    stiff = option(found, Basis.STIFFNESS, "acrylic")
    assert stiff.needed_mm == pytest.approx(16.485, abs=0.001)
    assert (stiff.thickness_mm, stiff.mass_kg, stiff.process) == (None, None, None)
    assert "not sold" in stiff.note


def test_a_material_that_no_process_at_hand_can_cut_says_why():
    pvc = load_material("pvc")
    none = option(alternatives(PLATE, Choice((pvc,))), Basis.SAME_THICKNESS, "pvc")
    assert none.process is None
    assert "hydrogen chloride" in none.caution
    routed = option(alternatives(PLATE, Choice((pvc,), (ROUTER,))), Basis.SAME_THICKNESS, "pvc")
    assert routed.process == "router"


def test_a_thickness_beyond_the_process_is_not_cut():
    thick = replace(ALU, stock_mm=(4.0, 20.0), e_gpa=2.0)
    stiff = option(alternatives(PLATE, Choice((thick,))), Basis.STIFFNESS)
    assert (stiff.thickness_mm, stiff.process) == (20.0, None)  # fibre laser: aluminium to 12 mm


def test_cost_only_from_the_users_price():
    # 0.324 kg at 75 % utilisation and 5.00 a kg: 0.324 / 0.75 x 5 = 2.16
    dear = replace(ALU, price_per_kg=Decimal("5.00"))
    stiff = option(alternatives(PLATE, Choice((dear,), utilisation=0.75)), Basis.STIFFNESS)
    assert stiff.cost == Decimal("2.16")
    net = option(alternatives(PLATE, Choice((dear,))), Basis.STIFFNESS)
    assert net.cost == Decimal("1.62")  # without a nest: the net mass
    assert option(alternatives(PLATE, Choice((ALU,))), Basis.STIFFNESS).cost is None


def test_lint_is_asked_with_the_new_thickness_and_process():
    asked = []

    def judge(material, thickness_mm, process):
        asked.append((material.id, thickness_mm, process.id))
        return ("small-hole",) if thickness_mm > 5.0 else ()

    found = alternatives(PLATE, Choice((ALU,), judge=judge))
    assert ("al-6061-t6", 6.0, "fibre-laser") in asked
    assert option(found, Basis.STIFFNESS).findings == ("small-hole",)
    assert option(found, Basis.STRENGTH).findings == ()


def test_without_material_or_thickness_there_is_no_table():
    assert alternatives(replace(PLATE, material=None), Choice((ALU,))) is None
    assert alternatives(replace(PLATE, thickness_mm=None), Choice((ALU,))) is None


def test_unknown_moduli_leave_their_lines_out():
    card = replace(load_material("cardboard"), stock_mm=())
    found = alternatives(PLATE, Choice((card,)))
    assert [o.basis for o in found.options if o.material == "cardboard"] == [Basis.SAME_THICKNESS]
    assert option(found, Basis.SAME_THICKNESS, "cardboard").deflection_ratio is None


@pytest.mark.parametrize(("needed", "sold"), [(3.0, 3.0), (3.0 + 1e-9, 3.0), (3.01, 4.0), (0.1, 2.0), (6.1, None)])
def test_next_thickness_sold(needed, sold):
    assert next_stock_mm(needed, (6.0, 2.0, 3.0, 4.0)) == sold


def test_price_per_kg_of_a_sheet():
    # 1000 x 500 x 3 of 7850 kg/m3 are 11.775 kg: 23.55 is 2.00 a kg
    assert price_per_kg(stock("s", "23.55")) == pytest.approx(Decimal("2.00"))
    # a metre of a strip 500 wide weighs the same
    assert price_per_kg(stock("s", length=None, metre="23.55")) == pytest.approx(Decimal("2.00"))
    assert price_per_kg(stock("s")) is None
    cheap, own = priced((STEEL, replace(STEEL, price_per_kg=Decimal(9))), (stock("s", "23.55"), stock("t", "11.775")))
    assert cheap.price_per_kg == pytest.approx(Decimal("2.00"))
    assert own.price_per_kg == Decimal(9)


def test_quantity_breaks_per_set():
    full = stock("full", "100")
    done = [
        estimate([Costed(PLATE.part, sets, STEEL, 3.0, LASER)], [full], layout(*nest), Ask(sets=sets))
        for sets, nest in ((5, [sheet(full, *["side"] * 5)]), (1, [sheet(full, "side")]))
    ]
    one, five = quantity_breaks(done)
    assert (one.sets, one.sheets, one.material_cost, one.cost_per_set) == (1, 1, Decimal("100.00"), 100.0)
    assert (five.sets, five.sheets, five.cost_per_set) == (5, 1, 20.0)
    assert quantity_breaks([estimate([PLATE])])[0].cost_per_set is None


def whole_job():
    """Two kinds of steel part and one of aluminium; two sets; the mass of a set worked by hand.

    side 200 x 100 x 4 twice a set: 2 x 0.628; arm 100 x 50 x 4 once: 0.157; tab of aluminium 50 x 40 x 3: 0.0162.
    """
    items = [
        Costed(rectangle("side", 200.0, 100.0), 4, STEEL, 4.0, LASER),
        Costed(rectangle("arm", 100.0, 50.0), 2, STEEL, 4.0, LASER),
        Costed(rectangle("tab", 50.0, 40.0), 2, ALU, 3.0, LASER),
    ]
    return items, estimate(items, ask=Ask(sets=2, mass_limit_kg=1.5))


def tables_of(items, judge=None):
    return [alternatives(item, Choice((STEEL, ALU), judge=judge)) for item in items]


def test_a_whole_set_in_another_material():
    items, now = whole_job()
    assert now.mass_kg == pytest.approx(2 * 0.628 + 0.157 + 0.0162)
    lines = {(x.present, x.material, x.basis): x for x in job_alternatives(tables_of(items), now)}
    light = lines["mild-steel", "al-6061-t6", Basis.STIFFNESS]
    # sides and arm as stiff in 6 mm: 2 x 0.324 + 0.081; the tab stays
    assert light.mass_kg == pytest.approx(2 * 0.324 + 0.081 + 0.0162)
    assert light.change_kg == pytest.approx(light.mass_kg - now.mass_kg)
    assert light.limit_left_kg == pytest.approx(1.5 - light.mass_kg)
    assert (light.parts, light.blocked) == (2, ())
    assert light.deflection_ratio == pytest.approx(3.0 * (4.0 / 6.0) ** 3)
    assert lines["mild-steel", "al-6061-t6", Basis.SAME_THICKNESS].deflection_ratio == pytest.approx(3.0)
    assert ("al-6061-t6", "mild-steel", Basis.SAME_THICKNESS) in lines
    assert [x.mass_kg for x in job_alternatives(tables_of(items), now)] == sorted(x.mass_kg for x in lines.values())


def test_parts_in_the_way_are_named():
    items, now = whole_job()
    tables = tables_of(items, judge=lambda material, thickness, process: ("thin-web",) if thickness == 6.0 else ())
    line = next(x for x in job_alternatives(tables, now) if (x.material, x.basis) == ("al-6061-t6", Basis.STIFFNESS))
    assert line.blocked == ("side", "arm")


def test_a_set_with_a_part_that_no_sheet_is_thick_enough_for_has_no_line():
    items, now = whole_job()
    thin = replace(ALU, stock_mm=(3.0, 5.0))
    tables = [alternatives(item, Choice((STEEL, thin))) for item in items]
    assert not [x for x in job_alternatives(tables, now) if (x.present, x.basis) == ("mild-steel", Basis.STIFFNESS)]
    assert job_alternatives(tables, replace(now, mass_kg=None)) == ()


def test_reports_of_the_whole_set():
    items, now = whole_job()
    whole = job_alternatives(tables_of(items, judge=lambda *_: ("thin-web",)), now)
    text = alternatives_text([], whole)
    assert "one set, material by material" in text
    assert "side and 1 more" in text
    document = json.loads(json.dumps(alternatives_document([], whole)))
    assert document["set"][0]["present"] == whole[0].present
    schema = json.loads((files("flatprep.report") / "schemas" / "alternatives.json").read_text())
    jsonschema.validate(alternatives_document(tables_of(items), whole), schema)


def test_reports():
    found = alternatives(PLATE, Choice((replace(ALU, price_per_kg=Decimal(5)),), judge=lambda *_: ("thin-web",)))
    text = alternatives_text([found], currency="EUR")
    for words in (
        "as stiff in bending",
        "as strong in bending",
        "side: mild-steel",
        "thin-web",
        "× 0.516",
        "EUR",
        "note:",
    ):
        assert words in text
    document = json.loads(json.dumps(alternatives_document([found], currency="EUR")))
    assert (document["schema"], document["parts"][0]["part"]) == ("flatprep-alternatives/1", "side")
    stiff = next(o for o in document["parts"][0]["options"] if o["basis"] == "stiffness")
    assert stiff["thickness_mm"] == 6.0
    assert stiff["findings"] == ["thin-web"]
    lines = alternatives_csv([found]).splitlines()
    assert lines[0].startswith("part,basis,material")
    assert len(lines) == 1 + len(found.options)
