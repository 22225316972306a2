"""A file's tags parted: plain entities, which are read here, and the rest, which ezdxf reads."""

from collections import defaultdict
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace

from ezdxf.document import Drawing as DxfDocument

from flatprep.drawing.columns import Codes, in_order
from flatprep.drawing.mend import NEWER, stands_on_edge
from flatprep.drawing.plain import BY_CLASSES, KINDS, Plain, is_bare, plain_entities
from flatprep.drawing.records import NotSiftedError, OddFileError, Records, Tags, records_of
from flatprep.drawing.unread import unread

_LINKED = {"VERTEX", "ATTRIB", "SEQEND"}
_STAND_IN = Tags([0, 8, 10, 20], ["POINT", "0", "0", "0"])


@dataclass(frozen=True, slots=True)
class Sifted:
    """A file's tags, parted.

    Attributes
    ----------
    plain : tuple of Plain
        In the file's order.
    rest
        What is left for ezdxf.
    places : dict of str to int
        Handle -> place among all entities, for those that are left.
    reordered : bool
        Whether coordinates stand in an order in which ezdxf's strict reader refuses them.
    """

    plain: tuple[Plain, ...] = ()
    rest: Tags = field(default_factory=Tags)
    places: Mapping[str, int] = field(default_factory=dict)
    reordered: bool = False

    def fitted(self, document: DxfDocument) -> "Sifted":
        """Hold it against the document that ezdxf made of the rest, and number entities that have no handles.

        Raises
        ------
        NotSiftedError
            When what was taken for plain lies in paper space, or more stands in model space than was left for it.
        """
        space = document.modelspace()
        plain = self.plain
        if plain and not plain[0].handle:
            # ezdxf numbers them one after another, beginning with the stand-in
            first = int(space[-1].dxf.handle, 16) - plain[0].place
            space.delete_entity(space[-1])
            plain = tuple(p._replace(handle=f"{first + p.place:X}") for p in plain)
        paper = document.block_records.get("*Paper_Space").dxf.handle
        if any(p.owner == paper for p in plain) or any(e.dxf.handle not in self.places for e in space):
            raise NotSiftedError
        return replace(self, plain=plain)


def sift(text: str, *, old: bool) -> Sifted:
    """Part the tags of a file.

    Parameters
    ----------
    text
        The file, decoded, its lines ended by line feeds.
    old
        Whether it is written as R12 or before.

    Raises
    ------
    OddFileError
        When something would be lost in it that can be put right.
    NotSiftedError, ValueError, LookupError
        When the file is not built as files are: ezdxf is to read it whole, and to say what is wrong.
    """
    f = records_of(text)
    if old and not NEWER.isdisjoint(f.kinds):
        raise OddFileError  # ezdxf reads them as it reads what R12 knows, and misses their flags
    if any(stands_on_edge(t.codes, t.values) for t in map(f.tags, _of_kind(f, "ELLIPSE"))):
        raise OddFileError
    entities = f.section("ENTITIES")
    alike = _alike(f, entities, KINDS - BY_CLASSES if old else KINDS)
    plain = _plain(f, alike)
    taken = {k for p in plain for k in _unit(f, p.place)}
    left = [k for k in entities if k not in taken and f.kinds[k] not in _LINKED]
    places = {f.handle(k): k for k in left}
    reordered = not all(in_order(codes) for _, codes in alike)
    numbered = not left and not any(p.handle for p in plain)
    if numbered:
        # they count on from what is read before them, tables and classes, and an old polyline counts for more than one
        sound = not f.has_handles("TABLES", "CLASSES") and all(p.kind != "POLYLINE" for p in plain)
    else:
        sound = all(p.handle for p in plain) and "" not in places and len(places) == len(left) and not reordered
    if reordered:
        # the reader that mends files looks through all else as well
        sound &= "TABLES" not in f.sections and all(is_bare(codes) for _, codes in alike)
    if not sound or any(_is_open(f, p.place - 1) for p in plain):
        raise NotSiftedError
    gone = unread(f) | dict.fromkeys(taken, Tags())
    if numbered and plain:
        gone[plain[0].place] = _STAND_IN
    return Sifted(tuple(plain), f.replaced(gone), places, reordered)


def _of_kind(f: Records, kind: str) -> list[int]:
    return [k for k, own in enumerate(f.kinds) if own == kind] if kind in f.kinds else []


def _unit(f: Records, k: int) -> range:
    """Numbers of the records of an entity: an old polyline goes on to its end."""
    last = k + 1
    if f.kinds[k] == "POLYLINE":
        while f.kinds[last] == "VERTEX":
            last += 1
        last = last + 1 if f.kinds[last] == "SEQEND" else k + 1
    return range(k, last)


def _alike(f: Records, section: Sequence[int], kinds: frozenset[str]) -> dict[tuple[str, Codes], list[int]]:
    """Group entities of these kinds by kind and make-up."""
    out: dict[tuple[str, Codes], list[int]] = defaultdict(list)
    for k in section:
        if f.kinds[k] in kinds:
            out[f.kinds[k], f.make_up(_unit(f, k))].append(k)
    return out


def _plain(f: Records, alike: Mapping[tuple[str, Codes], Sequence[int]]) -> list[Plain]:
    """Those that are plain entities, in order."""
    found: list[Plain] = []
    for (kind, codes), places in alike.items():
        found += plain_entities(kind, codes, places, [f.starts[k] for k in places], f.values)
    return sorted(found, key=lambda p: p.place)


def _is_open(f: Records, k: int) -> bool:
    """Whether vertices or attributes must follow a record."""
    return f.kinds[k] in ("POLYLINE", "VERTEX", "ATTRIB") or (
        f.kinds[k] == "INSERT" and 66 in f.make_up(range(k, k + 1))
    )
