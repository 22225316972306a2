"""The document layout.json."""

import json
from pathlib import Path

import numpy as np

from flatprep.geom.bulge import circle, reverse
from flatprep.model.drawing import Contour, Part
from flatprep.model.layout import Layout, Placement, SheetLayout, Unplaced
from flatprep.report.layout_json import PartSource, layout_document, relative, sheet_name

FRAME = Part(
    "frame", Contour(circle(0, 0, 50.0), layers=("OUT",)), (Contour(reverse(circle(0, 0, 40.0), closed=True)),)
)


def document():
    outline = np.array([[0.0, 0], [300, 0], [300, 200], [0, 200]])
    one = SheetLayout("al3", "al", 3.0, outline, (), 130.0, 0.25, (Placement("frame", 1, 90.0, True, -0.0, 70.125),))
    layout = Layout(2.0, 8.0, (one,), (Unplaced("frame", 1, "no room left on al3"),))
    return layout_document(layout, [PartSource(FRAME, Path("job/parts/frame.dxf"), "in", 2)], Path("job/out"))


def test_document_is_plain_json_with_the_contract_s_keys():
    found = json.loads(json.dumps(document(), allow_nan=False))
    assert found["schema"] == "flatprep-layout/1"
    assert (found["spacing_mm"], found["margin_mm"]) == (2.0, 8.0)
    (one,) = found["sheets"]
    assert one["file"] == "sheet-01.dxf"
    assert (one["stock"], one["material"], one["thickness_mm"]) == ("al3", "al", 3.0)
    assert one["outline"] == [[0, 0], [300, 0], [300, 200], [0, 200]]
    assert (one["holes"], one["used_length_mm"], one["utilisation"]) == ([], 130.0, 0.25)
    assert one["placements"] == [
        {"part": "frame", "copy": 1, "turn_deg": 90.0, "mirrored": True, "dx": 0.0, "dy": 70.125}
    ]
    assert "-0.0" not in json.dumps(one)
    assert found["unplaced"] == [{"part": "frame", "count": 1, "why": "no room left on al3"}]


def test_part_says_where_it_comes_from_and_a_point_in_its_material():
    (part,) = document()["parts"]
    assert (part["name"], part["drawing"], part["units"], part["quantity"]) == ("frame", "../parts/frame.dxf", "in", 2)
    assert part["layers"] == ["0", "OUT"]
    x, y = part["at"]
    assert 40.0 < np.hypot(x, y) < 50.0


def test_paths_are_relative_to_the_folder_and_numbers_have_two_digits():
    assert relative(Path("a/b/c.dxf"), Path("a/d")) == "../b/c.dxf"
    assert relative(Path("/x/c.dxf"), Path("/x")) == "c.dxf"
    assert [sheet_name(1), sheet_name(12), sheet_name(100)] == ["sheet-01", "sheet-12", "sheet-100"]
