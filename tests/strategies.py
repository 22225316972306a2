"""Hypothesis strategies for drawings: any entity, any number, any name."""

import math
from typing import Any

import ezdxf
from ezdxf.document import Drawing as DxfDocument
from hypothesis import strategies as st

ODD = (0.0, -0.0, 1e-300, 1e-9, 1e9, 1e15, 1e300, float("nan"), float("inf"), float("-inf"), -5.0)
USUAL = st.floats(-500.0, 500.0).map(lambda v: round(v, 3))
NUMBERS = st.one_of(USUAL, USUAL, USUAL, st.sampled_from(ODD))
WORDS = st.text(st.characters(exclude_categories=["Cs"], exclude_characters="\n\r\0"), max_size=12)
LAYERS = st.sampled_from(["0", "CUT", "BEND", "ENGRAVE", "Defpoints", "OUTLINE"])
Made = tuple[str, dict[str, Any]]


def points(least: int, most: int) -> st.SearchStrategy[list[tuple[float, float]]]:
    """Some points, now and then the same one again."""
    one = st.tuples(NUMBERS, NUMBERS)
    return st.lists(st.one_of(one, one, st.just((0.0, 0.0))), min_size=least, max_size=most)


@st.composite
def entities(draw: st.DrawFn) -> Made:
    """The kind of an entity and what it is made of."""
    kind = draw(
        st.sampled_from(["line", "circle", "arc", "ellipse", "spline", "lwpolyline", "box", "box", "text", "mtext"])
    )
    at = (draw(NUMBERS), draw(NUMBERS))
    made: dict[str, Any] = {"layer": draw(LAYERS), "at": at}
    match kind:
        case "line":
            made["end"] = draw(st.one_of(st.just(at), st.tuples(NUMBERS, NUMBERS)))
        case "circle":
            made["radius"] = draw(NUMBERS)
        case "arc":
            made |= {"radius": draw(NUMBERS), "start": draw(NUMBERS), "end": draw(NUMBERS)}
        case "ellipse":
            axis = (draw(NUMBERS), draw(NUMBERS))
            made |= {
                "axis": axis if 1e-3 < math.hypot(*axis) < 1e100 else (1.0, 0.0),
                "ratio": draw(st.floats(1e-6, 1.0)),
            }
        case "spline":
            made |= {"points": draw(points(4, 7)), "closed": draw(st.booleans())}
        case "lwpolyline":
            made |= {"points": draw(points(0, 8)), "bulge": draw(NUMBERS), "closed": draw(st.booleans())}
        case "box":
            made["size"] = (draw(USUAL), draw(USUAL))
        case _:
            made["words"] = draw(WORDS)
    return kind, made


def add(space: Any, kind: str, made: dict[str, Any]) -> None:
    """Put an entity into a layout or a block."""
    at, attribs = made["at"], {"layer": made["layer"]}
    x, y = at
    match kind:
        case "line":
            space.add_line(at, made["end"], dxfattribs=attribs)
        case "circle":
            space.add_circle(at, made["radius"], dxfattribs=attribs)
        case "arc":
            space.add_arc(at, made["radius"], made["start"], made["end"], dxfattribs=attribs)
        case "ellipse":
            space.add_ellipse(at, (*made["axis"], 0), made["ratio"], dxfattribs=attribs)
        case "spline":
            spline = space.add_spline(dxfattribs=attribs)
            (spline.set_closed if made["closed"] else spline.set_open_uniform)([(*p, 0) for p in made["points"]])
        case "lwpolyline":
            rows = [(*p, made["bulge"]) for p in made["points"]]
            space.add_lwpolyline(rows, format="xyb", close=made["closed"], dxfattribs=attribs)
        case "box":
            w, h = made["size"]
            space.add_lwpolyline([(x, y), (x + w, y), (x + w, y + h), (x, y + h)], close=True, dxfattribs=attribs)
        case "text":
            space.add_text(made["words"], height=3, dxfattribs={**attribs, "insert": at})
        case "mtext":
            space.add_mtext(made["words"], dxfattribs={**attribs, "insert": at, "char_height": 3})


@st.composite
def drawings(draw: st.DrawFn, most_rows: int = 400) -> DxfDocument:
    """A drawing: entities in model space and in blocks that are inserted anyhow, also into each other."""
    doc = ezdxf.new(draw(st.sampled_from(["R12", "R2000", "R2010"])))
    doc.header["$INSUNITS"] = draw(st.sampled_from([0, 1, 4, 5, 6, 99]))
    blocks = [doc.blocks.new(f"B{k}") for k in range(draw(st.integers(0, 3)))]
    for space in (*blocks, doc.modelspace()):
        for kind, made in draw(st.lists(entities(), max_size=8 if space is doc.modelspace() else 3)):
            if kind not in ("lwpolyline", "box", "spline", "ellipse", "mtext") or doc.dxfversion != "AC1009":
                add(space, kind, made)
        for _ in range(draw(st.integers(0, 2)) if blocks else 0):
            attribs = {"xscale": draw(NUMBERS), "yscale": draw(NUMBERS), "rotation": draw(NUMBERS)}
            attribs |= {"row_count": draw(st.sampled_from([1, 2, most_rows])), "row_spacing": draw(NUMBERS)}
            space.add_blockref(draw(st.sampled_from(blocks)).name, (draw(NUMBERS), draw(NUMBERS)), dxfattribs=attribs)
    return doc
