"""Model space with its blocks taken apart, within caps: every entity once, with the layer and handle it answers to."""

from collections.abc import Iterable, Iterator
from typing import Any, NamedTuple

from ezdxf.document import Drawing as DxfDocument
from ezdxf.entities.dxfentity import DXFEntity

from flatprep.base.errors import DrawingError
from flatprep.drawing.limits import ReadLimits

Dxf = Any


class Loose(NamedTuple):
    """An entity of model space, or of a block inserted there.

    `layer`, `handle` and `color` are those it answers to: content on layer 0 of a block takes the layer of the
    insertion, content of a block has the handle of the outermost insertion.
    """

    entity: DXFEntity
    layer: str
    handle: str
    color: int
    linetype: str


def explode(document: DxfDocument, limits: ReadLimits) -> Iterator[Loose]:
    """Yield what model space holds, blocks taken apart.

    Raises
    ------
    DrawingError
        When that would be more entities, or blocks deeper inside each other, than the limits allow.
    """
    total = _count(document, limits)
    if total > limits.entities:
        raise DrawingError(
            f"{total:.3g} entities once its blocks are taken apart, more than the {limits.entities} that are read",
            "export only the outlines of the part",
        )
    layers = _Layers(document)
    for entity in document.modelspace():
        above = _Above("0", entity.dxf.handle or "", 7, "CONTINUOUS", depth=0)
        if entity.dxftype() == "INSERT":
            yield from _open(entity, layers, above, limits)
        else:
            yield _loose(entity, layers, above)


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

    def color(self, name: str) -> int:
        return self._of.get(name.lower(), (7, ""))[0]

    def linetype(self, name: str) -> str:
        return self._of.get(name.lower(), (7, "CONTINUOUS"))[1]


def _loose(entity: Dxf, layers: _Layers, above: _Above) -> Loose:
    """Return an entity with what it takes from its layer and from the insertion it stands in."""
    dxf = entity.dxf
    own = dxf.get("layer", "0")
    layer = above.layer if above.depth and own == "0" else own
    color = dxf.get("color", 256)
    color = layers.color(layer) if color == 256 else above.color if color == 0 else color
    linetype = dxf.get("linetype", "BYLAYER").upper()
    if linetype == "BYLAYER":
        linetype = layers.linetype(layer).upper()
    elif linetype == "BYBLOCK":
        linetype = above.linetype
    return Loose(entity, layer, above.handle, color, linetype)


def _open(entity: Dxf, layers: _Layers, above: _Above, limits: ReadLimits) -> Iterator[Loose]:
    whole = _loose(entity, layers, above)
    if entity.dxftype() != "INSERT" or block_fault(entity):
        yield whole
        return
    below = _Above(whole.layer, above.handle, whole.color, whole.linetype, above.depth + 1)
    for attribute in entity.attribs:
        yield whole._replace(entity=attribute)
    for single in _singles(entity):
        for child in single.virtual_entities():
            yield from _open(child, layers, below, limits)


def block_fault(insert: Dxf) -> str:
    """Say why an insertion brings nothing: its block lies in another file, or is not there; else nothing."""
    block = insert.block()
    if block is None:
        return "its block is not in the file"
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
