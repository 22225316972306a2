"""Draw the sample job: `drawings/` clean, `as_received/` as such files come by mail, `stock/` a remnant.

    python sample_parts/draw.py

The same files come out byte for byte every time.
"""

import logging
import random
from collections.abc import Callable, Iterable
from math import cos, degrees, hypot, pi, sin
from pathlib import Path as File

import ezdxf
from ezdxf.document import Drawing
from ezdxf.layouts import BaseLayout
from ezdxf.math import bulge_to_arc
from hoe import PLATES, REMNANT, Circle, Path, Plate

HERE = File(__file__).parent
INSUNITS = {"": 0, "in": 1, "mm": 4}


def new_drawing(version: str = "R2010", units: str = "mm") -> Drawing:
    doc = ezdxf.new(version, units=INSUNITS[units])
    if version != "R12":
        doc.header["$MEASUREMENT"] = 0 if units == "in" else 1
    for layer, linetype in (("CUT", "CONTINUOUS"), ("BEND", "CONTINUOUS"), ("ENGRAVE", "CONTINUOUS")):
        doc.layers.add(layer, linetype=linetype)
    return doc


def add_contour(space: BaseLayout, contour: Path | Circle, layer: str = "CUT") -> None:
    if isinstance(contour, Circle):
        space.add_circle((contour.x, contour.y), contour.diameter / 2, dxfattribs={"layer": layer})
    else:
        space.add_lwpolyline(contour, format="xyb", close=True, dxfattribs={"layer": layer})


def add_bends_and_strokes(space: BaseLayout, plate: Plate) -> None:
    for start, end in plate.bends:
        space.add_line(start, end, dxfattribs={"layer": "BEND"})
    for stroke in plate.strokes:
        space.add_lwpolyline(stroke, dxfattribs={"layer": "ENGRAVE"})


def clean(plate: Plate) -> Drawing:
    doc = new_drawing(units=plate.units)
    for contour in (plate.outer, *plate.holes):
        add_contour(doc.modelspace(), contour)
    add_bends_and_strokes(doc.modelspace(), plate)
    return doc


# ---------------------------------------------------------------- as received: one habit of the world a drawing


def explode(space: BaseLayout, path: Path, *, gaps: dict[int, float] | None = None, layer: str = "CUT") -> None:
    """Single lines and arcs; `gaps` shortens the lines of these numbers at their end, in mm."""
    for i, (x, y, bulge) in enumerate(path):
        nx, ny, _ = path[(i + 1) % len(path)]
        if bulge:
            centre, start, end, radius = bulge_to_arc((x, y), (nx, ny), bulge)
            space.add_arc(centre, radius, degrees(start), degrees(end), dxfattribs={"layer": layer})
        else:
            keep = 1 - (gaps or {}).get(i, 0.0) / hypot(nx - x, ny - y)
            end_point = (x + keep * (nx - x), y + keep * (ny - y))
            space.add_line((x, y), end_point, dxfattribs={"layer": layer})


def shuffled(space: BaseLayout) -> None:
    """Put the entities of a layout into an order no chain follows."""
    entities = list(space)
    random.Random(7).shuffle(entities)
    for entity in entities:
        space.unlink_entity(entity)
    for entity in entities:
        space.add_entity(entity)


def exploded_with_gaps(plate: Plate) -> Drawing:
    """Every line on its own and out of order; one gap of 0.02 mm, one of 0.30 mm; a title and a dimension."""
    doc = new_drawing()
    space = doc.modelspace()
    explode(space, plate.outer, gaps={1: 0.02, 3: 0.30})
    for hole in plate.holes:
        add_contour(space, hole)
    shuffled(space)
    space.add_text("SIDE PLATE 4 MM, 6 LEFT 6 RIGHT", height=8, dxfattribs={"layer": "TITLE"}).set_placement((120, -90))
    space.add_linear_dim(base=(0, -75), p1=(0, 0), p2=(430, -20), dxfattribs={"layer": "DIM"}).render()
    return doc


def blocks_and_doubles(plate: Plate) -> Drawing:
    """Windows as turned inserts of one block; the rim lies twice on itself."""
    doc = new_drawing()
    space = doc.modelspace()
    hub, first_window = plate.holes[:2]
    for contour in (plate.outer, plate.outer, hub, *plate.holes[6:]):
        add_contour(space, contour)
    add_contour(doc.blocks.new("WINDOW"), first_window)
    for k in range(5):
        space.add_blockref("WINDOW", (0, 0), dxfattribs={"rotation": 72 * k, "layer": "CUT"})
    return doc


def old_without_units(plate: Plate) -> Drawing:
    """R12 with no unit in its header, circles drawn as two arcs."""
    doc = new_drawing("R12", units="")
    for c in (plate.outer, *plate.holes):
        for start in (0, 180):
            doc.modelspace().add_arc((c.x, c.y), c.diameter / 2, start, start + 180, dxfattribs={"layer": "CUT"})
    return doc


def nested_blocks(plate: Plate) -> Drawing:
    """All in a block in a block; the rim is an ellipse as wide as high."""
    doc = new_drawing("R2000")
    inner, outer = doc.blocks.new("PART"), doc.blocks.new("SHEET_FRAME")
    inner.add_ellipse((0, 0), (plate.outer.diameter / 2, 0), 1.0, dxfattribs={"layer": "CUT"})
    for hole in plate.holes:
        add_contour(inner, hole)
    outer.add_blockref("PART", (100, 50), dxfattribs={"rotation": 30})
    doc.modelspace().add_blockref("SHEET_FRAME", (-100, -50))
    return doc


def quarter_splines(space: BaseLayout, x: float, y: float, radius: float) -> None:
    """Circle as four rational splines of degree 2: exact, as many programs write it."""
    for quarter in range(4):
        a = quarter * pi / 2
        points = [
            (x + radius * k * cos(a + t), y + radius * k * sin(a + t))
            for k, t in ((1.0, 0.0), (2**0.5, pi / 4), (1.0, pi / 2))
        ]
        spline = space.add_rational_spline(points, weights=[1, 0.5**0.5, 1], degree=2, dxfattribs={"layer": "CUT"})
        spline.knots = [0, 0, 0, 1, 1, 1]


def splines(plate: Plate) -> Drawing:
    doc = new_drawing("R2018")
    explode(doc.modelspace(), plate.outer)
    for hole in plate.holes:
        if isinstance(hole, Circle):
            quarter_splines(doc.modelspace(), hole.x, hole.y, hole.diameter / 2)
        else:
            add_contour(doc.modelspace(), hole)
    return doc


def scaled(path: Path | Circle, k: float) -> Path | Circle:
    if isinstance(path, Circle):
        return Circle(path.x * k, path.y * k, path.diameter * k)
    return tuple((x * k, y * k, b) for x, y, b in path)


def inches_unsaid(plate: Plate) -> Drawing:
    """Drawn in inches, header says nothing: read as mm the part is 4 mm long."""
    doc = new_drawing(units="")
    for contour in (plate.outer, *plate.holes):
        add_contour(doc.modelspace(), scaled(contour, 1 / 25.4))
    return doc


def old_polylines(plate: Plate) -> Drawing:
    """Inches, the old kind of polyline, first vertex repeated at the end."""
    doc = new_drawing("R2000", units="in")
    for contour in (plate.outer, *plate.holes):
        if isinstance(contour, Circle):
            add_contour(doc.modelspace(), contour)
        else:
            vertices = (*contour, (*contour[0][:2], 0.0))
            doc.modelspace().add_polyline2d(vertices, format="xyb", close=True, dxfattribs={"layer": "CUT"})
    return doc


def seen_from_behind(plate: Plate) -> Drawing:
    """Mirrored extrusion: every x is written with the other sign."""
    doc = new_drawing()
    behind = {"layer": "CUT", "extrusion": (0, 0, -1)}
    for contour in (plate.outer, *plate.holes):
        if isinstance(contour, Circle):
            doc.modelspace().add_circle((-contour.x, contour.y), contour.diameter / 2, dxfattribs=behind)
        else:
            mirrored = [(-x, y, -b) for x, y, b in contour]
            doc.modelspace().add_lwpolyline(mirrored, format="xyb", close=True, dxfattribs=behind)
    return doc


def overlapping_line(plate: Plate) -> Drawing:
    """A stretch of the outline was drawn a second time."""
    doc = clean(plate)
    (x0, y0, _), (x1, y1, _) = plate.outer[1:3]
    middle = ((x0 + x1) / 2, (y0 + y1) / 2)
    doc.modelspace().add_line((x0, y0), middle, dxfattribs={"layer": "CUT"})
    return doc


def chords(plate: Plate) -> Drawing:
    """Circles as closed polylines of 48 chords."""
    doc = new_drawing()
    add_contour(doc.modelspace(), plate.outer)
    for hole in plate.holes:
        r = hole.diameter / 2
        points = [(hole.x + r * cos(k * pi / 24), hole.y + r * sin(k * pi / 24)) for k in range(48)]
        doc.modelspace().add_lwpolyline(points, close=True, dxfattribs={"layer": "CUT"})
    return doc


def scaled_block(plate: Plate) -> Drawing:
    """An inch block put into a mm drawing at a scale of 25.4."""
    doc = new_drawing()
    block = doc.blocks.new("LINK_INCH")
    for contour in (plate.outer, *plate.holes):
        add_contour(block, scaled(contour, 1 / 25.4))
    attribs = {"xscale": 25.4, "yscale": 25.4, "zscale": 25.4, "layer": "CUT"}
    doc.modelspace().add_blockref("LINK_INCH", (0, 0), dxfattribs=attribs)
    return doc


def all_on_layer_0(plate: Plate) -> Drawing:
    """One layer for everything; the bend lines differ by their line type, and a stray line was left."""
    doc = new_drawing()
    doc.linetypes.add("DASHED", [0.75, 0.5, -0.25])
    space = doc.modelspace()
    for contour in (plate.outer, *plate.holes):
        add_contour(space, contour, layer="0")
    for start, end in plate.bends:
        space.add_line(start, end, dxfattribs={"layer": "0", "linetype": "DASHED"})
    space.add_line((60, 70), (75, 70), dxfattribs={"layer": "0"})
    return doc


def crumbs(plate: Plate) -> Drawing:
    """A segment of 0.01 mm in the outline, and two lines of no length."""
    doc = new_drawing()
    (x0, y0, _), (x1, y1, _) = plate.outer[1:3]
    k = 0.01 / hypot(x1 - x0, y1 - y0)
    crumb = (x0 + k * (x1 - x0), y0 + k * (y1 - y0), 0.0)
    add_contour(doc.modelspace(), (*plate.outer[:2], crumb, *plate.outer[2:]))
    for hole in plate.holes:
        add_contour(doc.modelspace(), hole)
    for point in ((x0, y0), (x1, y1)):
        doc.modelspace().add_line(point, point, dxfattribs={"layer": "CUT"})
    return doc


def lifted(plate: Plate) -> Drawing:
    """The outline lies at z = 6, the slots at z = 0: taken from a solid model."""
    doc = new_drawing()
    doc.modelspace().add_lwpolyline(plate.outer, format="xyb", close=True, dxfattribs={"layer": "CUT", "elevation": 6})
    for hole in plate.holes:
        add_contour(doc.modelspace(), hole)
    return doc


def framed(plate: Plate) -> Drawing:
    """With sheet frame, title block and notes."""
    doc = clean(plate)
    space = doc.modelspace()
    for corners in (((-60, -120), (460, 240)), ((260, -120), (460, -60))):
        (x0, y0), (x1, y1) = corners
        frame = [(x0, y0), (x1, y0), (x1, y1), (x0, y1)]
        space.add_lwpolyline(frame, close=True, dxfattribs={"layer": "TITLE_FRAME"})
    space.add_mtext(
        "TRAY SIDE\\PBIRCH 6 MM\\PGRAIN ALONG", dxfattribs={"layer": "TITLE", "char_height": 6}
    ).set_location((270, -68))
    return doc


def annotated(plate: Plate) -> Drawing:
    """Centre lines, a hatch, a point and a dimension beside the cut lines."""
    doc = clean(plate)
    doc.linetypes.add("CENTER", [2.0, 1.25, -0.25, 0.25, -0.25])
    space = doc.modelspace()
    space.add_line((94, -20), (94, 110), dxfattribs={"layer": "CENTRE", "linetype": "CENTER"})
    space.add_hatch(color=8, dxfattribs={"layer": "HATCH"}).paths.add_polyline_path([(0, 0), (60, 0), (60, 8)])
    space.add_point((94, 62), dxfattribs={"layer": "CENTRE"})
    space.add_linear_dim(base=(0, 110), p1=(0, 90), p2=(188, 90), dxfattribs={"layer": "DIM"}).render()
    return doc


def exploded(plate: Plate) -> Drawing:
    """Lines and arcs in any order, no gap."""
    doc = new_drawing("R2000")
    for contour in (plate.outer, *plate.holes):
        explode(doc.modelspace(), contour)
    shuffled(doc.modelspace())
    return doc


def lettering_as_text(plate: Plate) -> Drawing:
    """The engraving is text: the cutter needs outlines or strokes."""
    doc = clean(Plate(plate.outer, plate.holes, strokes=plate.strokes[:1]))
    doc.modelspace().add_text("WHEEL HOE", height=9.6, dxfattribs={"layer": "ENGRAVE"}).set_placement((-43, -5))
    return doc


AS_RECEIVED: dict[str, Callable[[Plate], Drawing]] = {
    "side_plate": exploded_with_gaps,
    "wheel_disc": blocks_and_doubles,
    "washer": old_without_units,
    "hub_flange": nested_blocks,
    "depth_quadrant": splines,
    "clamp_plate": inches_unsaid,
    "tool_bar_plate": old_polylines,
    "sweep_blade": seen_from_behind,
    "side_knife": overlapping_line,
    "link_lower": chords,
    "link_upper": scaled_block,
    "tray_bracket": all_on_layer_0,
    "skid": crumbs,
    "tray_floor": lifted,
    "tray_side": framed,
    "tray_end": annotated,
    "tray_divider": exploded,
    "name_plate": lettering_as_text,
}


def write_all(folder: str, drawings: Iterable[tuple[str, Drawing]]) -> None:
    (HERE / folder).mkdir(exist_ok=True)
    for name, doc in drawings:
        for kind in sorted(doc.entitydb.dxf_types_in_use()):  # else listed in the order of a set
            doc.classes.add_class(kind)
        doc.saveas(HERE / folder / f"{name}.dxf")


def main() -> None:
    logging.getLogger("ezdxf").setLevel(logging.ERROR)  # says of every R12 file that it has no units: meant so
    ezdxf.options.write_fixed_meta_data_for_testing = True
    write_all("drawings", ((name, clean(plate)) for name, plate in PLATES.items()))
    write_all("as_received", ((name, AS_RECEIVED[name](plate)) for name, plate in PLATES.items()))
    write_all("stock", [("rest_wear_plate_5", clean(REMNANT))])


if __name__ == "__main__":
    main()
