"""What file names say: ways of writing, and names that say nothing."""

import pytest

from flatprep.job.guess import NameGuess, guess_from_name
from flatprep.profile.material_load import all_materials

MATERIALS = all_materials()


@pytest.mark.parametrize(
    ("stem", "thickness", "quantity", "material"),
    [
        ("bracket_3mm_x2", "3mm", 2, None),
        ("Bracket-5052-H32-3mm-x12", "3mm", 12, "al-5052-h32"),
        ("tray bracket 6061 T6 t=6mm (2x)", "6mm", 2, "al-6061-t6"),
        ("skid_HDPE_0.5in", "0.5in", None, "hdpe"),
        ("cover_16ga_steel_4pcs", "16ga", 4, "mild-steel"),
        ("1.5mm plywood lid", "1.5mm", None, "birch-ply"),
        ("blade_ar500_5mm_qty6", "5mm", 6, "wear-plate-500"),
        ("plate t4mm 1.4301", "4mm", None, "stainless-304"),
        ("gasket 0,8mm", "0.8mm", None, None),
        ("stainless steel ring 2 mm 3 off", "2mm", 3, "stainless-304"),
        ("Fin_3_millimeter_polypropylene", "3mm", None, "polypropylene"),
        ("Side_Panel_100mm", None, None, None),
        ("Side_Panel_100mm_3mm", "3mm", None, None),
        # a longer name wins over the shorter one in it
        ("galvanized steel clip 1mm", "1mm", None, "galvanised-steel"),
    ],
)
def test_names_that_tell(stem, thickness, quantity, material):
    assert guess_from_name(stem, MATERIALS) == NameGuess(thickness, quantity, material)


@pytest.mark.parametrize(
    "stem",
    [
        "leaf",
        "panel_120x40",  # a size
        "plate_6061",  # a number alone may be anything
        "sheet A4",  # paper
        "bolt M5",
        "rev2",
        "leaf_x0",
        "x100y200",
        "part 0mm",
        "ponytail",  # holds "pony", no material
        "",
    ],
)
def test_names_that_tell_nothing(stem):
    assert guess_from_name(stem, MATERIALS) == NameGuess()
