"""Model space with its blocks taken apart, within caps: every entity once, with the layer and handle it answers to."""

from collections.abc import Iterable, Iterator
from functools import cache, partial
from operator import itemgetter
from typing import Any, NamedTuple

from ezdxf.document import Drawing as DxfDocument
from ezdxf.entities.dxfentity import DXFTagStorage

from flatprep.base.errors import DrawingError
from flatprep.drawing.limits import ReadLimits
from flatprep.drawing.load import Loaded
from flatprep.drawing.plain import Plain

Dxf = Any
INVISIBLE = "INVISIBLE"
"""Kind of what is in the drawing and is not shown, such as the other states of a block that has several."""


class Loose(NamedTuple):
    """An entity of model space, or of a block inserted there.

    `layer`, `handle` and `color` are those it answers to: content on layer 0 of a block takes the layer of the
    insertion, content of a block has the handle of the outermost insertion.
    """

    entity: Dxf
    kind: str
    layer: str
    handle: str
    color: int
    linetype: str


def explode(loaded: Loaded, limits: ReadLimits) -> Iterator[Loose]:
    """Yield what model space holds, blocks taken apart.

    Raises
    ------
    DrawingError
        When that would be more entities, or blocks deeper inside each other, than the limits allow.
    """
    document = loaded.document
    total = _count(document, limits) + len(loaded.plain)
    if total > limits.entities:
        raise DrawingError(
            f"{total:.3g} entities once its blocks are taken apart, more than the {limits.entities} that are read",
            "export only the outlines of the part",
        )
    layers = _Layers(document)
    nothing = _Above("0", "", 7, "CONTINUOUS", depth=0)
    looks_of = cache(partial(layers.looks, above=nothing))
    for entity in _in_order(loaded):
        if isinstance(entity, Plain):
            layer, color, linetype = looks_of((entity.layer, entity.color, entity.linetype))
            yield Loose(entity.drawn, entity.kind, layer, entity.handle, color, linetype)
            continue
        above = nothing._replace(handle=entity.dxf.handle or "")
        if entity.dxftype() == "INSERT":
            yield from _open(entity, layers, above, limits)
        else:
            yield _loose(entity, layers, above)


def _in_order(loaded: Loaded) -> Iterable[Dxf | Plain]:
    """Return what model space holds, as it stands in the file."""
    whole = loaded.document.modelspace()
    if not loaded.plain:
        return whole
    others = [(loaded.places[e.dxf.handle], e) for e in whole]
    return [e for _, e in sorted([*others, *((p.place, p) for p in loaded.plain)], key=itemgetter(0))]


class _Above(NamedTuple):
    layer: str
    handle: str
    color: int
    linetype: str
    depth: int


class _Layers:
    """Colours and linetypes of the layers."""

    def __init__(self, document: DxfDocument) -> None:
        self._of = {
            layer.dxf.name.lower(): (abs(int(layer.dxf.color)), str(layer.dxf.linetype)) for layer in document.layers
        }

    def looks(self, own: tuple[str, int, str], above: _Above) -> tuple[str, int, str]:
        """Layer, colour and linetype of an entity after BYLAYER and BYBLOCK, and layer 0 of a block, are resolved."""
        layer, color, linetype = own
        layer = above.layer if above.depth and layer == "0" else layer
        own_color, own_linetype = self._of.get(layer.lower(), (7, "CONTINUOUS"))
        color = own_color if color == 256 else above.color if color == 0 else color
        linetype = linetype.upper()
        if linetype == "BYLAYER":
            linetype = own_linetype.upper()
        elif linetype == "BYBLOCK":
            linetype = above.linetype
        return layer, color, linetype


def _loose(entity: Dxf, layers: _Layers, above: _Above) -> Loose:
    """Return an entity with what it takes from its layer and from the insertion it stands in."""
    layer, color, linetype = layers.looks(_own_looks(entity), above)
    hidden = not isinstance(entity, DXFTagStorage) and entity.dxf.get("invisible", 0)
    return Loose(entity, INVISIBLE if hidden else entity.dxftype(), layer, above.handle, color, linetype)


def _own_looks(entity: Dxf) -> tuple[str, int, str]:
    if isinstance(entity, DXFTagStorage):  # a kind that ezdxf does not know: its tags are all there is
        first = entity.xtags.get_subclass("AcDbEntity") if entity.is_graphic_entity else entity.base_class
        return str(first.get_first_value(8, "0")), 256, "BYLAYER"
    dxf = entity.dxf
    return dxf.get("layer", "0"), dxf.get("color", 256), dxf.get("linetype", "BYLAYER")


def _open(entity: Dxf, layers: _Layers, above: _Above, limits: ReadLimits) -> Iterator[Loose]:
    whole = _loose(entity, layers, above)
    if whole.kind != "INSERT" or block_fault(entity):
        yield whole
        return
    below = _Above(whole.layer, above.handle, whole.color, whole.linetype, above.depth + 1)
    for attribute in entity.attribs:
        yield whole._replace(entity=attribute, kind=attribute.dxftype())
    for single in _singles(entity):
        unknown: list[Dxf] = []
        for child in single.virtual_entities(skipped_entity_callback=lambda e, _: unknown.append(e)):  # noqa: B023
            yield from _open(child, layers, below, limits)
        for child in unknown:
            yield _loose(child, layers, below)


def block_fault(insert: Dxf) -> str:
    """Say why an insertion brings nothing: its block lies elsewhere, is not there or has no size; else nothing."""
    block = insert.block()
    if block is None:
        return "its block is not in the file"
    if 0.0 in (insert.dxf.get("xscale", 1.0), insert.dxf.get("yscale", 1.0)):
        return "its scale is zero"
    return "a reference to another file: not opened" if block.block.is_xref or block.block.is_xref_overlay else ""


def _singles(insert: Dxf) -> Iterable[Dxf]:
    return insert.multi_insert() if insert.mcount > 1 else (insert,)


def _count(document: DxfDocument, limits: ReadLimits) -> int:
    """Entities after exploding, counted block by block without exploding anything."""
    known: dict[str, int] = {}

    def of_block(name: str, path: tuple[str, ...]) -> int:
        key = name.lower()
        if key in path:
            raise DrawingError(f"block {name!r} inserts itself", "mend the block in the CAD program, or explode it")
        if len(path) > limits.block_depth:
            raise DrawingError(
                f"blocks stand more than {limits.block_depth} deep inside each other",
                "explode the blocks before export",
            )
        if key not in known:
            block: Iterable[Dxf] = document.blocks.get(name) or ()
            known[key] = of_entities(block, (*path, key))
        return known[key]

    def of_entities(entities: Iterable[Dxf], path: tuple[str, ...]) -> int:
        total = 0
        for entity in entities:
            inserts = entity.dxftype() == "INSERT"
            copies = max(1, int(entity.mcount)) if inserts else 1
            total += copies * (of_block(entity.dxf.name, path) if inserts else 1)
        return total

    return of_entities(document.modelspace(), ())
