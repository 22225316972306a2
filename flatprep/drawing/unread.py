"""Records that no reading of a flat part needs: how things look on a screen, and what belongs to other programs."""

from flatprep.drawing.records import Records, Tags

_LOOKS = frozenset(
    [
        "ACDBDETAILVIEWSTYLE",
        "ACDBSECTIONVIEWSTYLE",
        "CELLSTYLEMAP",
        "CLASS",
        "DICTIONARYVAR",
        "MATERIAL",
        "RASTERVARIABLES",
        "SCALE",
        "SORTENTSTABLE",
        "SUN",
        "TABLESTYLE",
        "VISUALSTYLE",
        "XRECORD",
    ]
)
_LAYOUTS = ("*model_space", "*paper_space", "$model_space", "$paper_space")
"""Blocks that hold what lies in model space and on sheets."""


_VARIABLES = frozenset({"$ACADVER", "$DWGCODEPAGE", "$HANDSEED", "$INSUNITS"})
"""What ezdxf asks the header for when it reads."""
_OF_LINETYPE = frozenset({0, 2, 5, 49, 70, 100, 102, 330, 360})
"""Codes of a linetype: its name and its dashes."""


def unread(f: Records) -> dict[int, Tags]:
    """Numbers of the records that ezdxf need not read, each with what is left of it."""
    objects = f.section("OBJECTS")
    out = {k: Tags() for k in (*f.section("CLASSES"), *objects) if f.kinds[k] in _LOOKS}
    out |= dict.fromkeys(_dictionaries(f, objects) | _blocks(f), Tags())
    out |= {k: _name_and_dashes(f.tags(k)) for k in f.section("TABLES") if f.kinds[k] == "LTYPE"}
    if "HEADER" in f.sections:
        head = f.sections["HEADER"]
        out[head] = _short_header(f.tags(head))
    return out


def _name_and_dashes(linetype: Tags) -> Tags:
    kept = [(c, v) for c, v in zip(linetype.codes, linetype.values, strict=True) if c in _OF_LINETYPE]
    return Tags([c for c, _ in kept], [v for _, v in kept])


def _short_header(header: Tags) -> Tags:
    """Leave the section's name, and the variables that are asked for."""
    out = Tags(header.codes[:2], header.values[:2])
    for k, code in enumerate(header.codes[:-1]):
        if code == 9 and header.values[k] in _VARIABLES:
            out.codes.extend(header.codes[k : k + 2])
            out.values.extend(header.values[k : k + 2])
    return out


def _dictionaries(f: Records, objects: range) -> set[int]:
    """Dictionaries of single entities and layers; the root, which is the first object, and what it names stay."""
    if not objects or f.kinds[objects[0]] != "DICTIONARY":
        return set()
    root = objects[0]
    start, end = f.starts[root], f.starts[root + 1]
    named = {"0", f.handle(root), *f.values[start:end]}
    return {
        k
        for k in objects[1:]
        if f.kinds[k] == "DICTIONARY" and f.handle(k) not in named and f.value(k, 330) not in named | {""}
    }


def _blocks(f: Records) -> set[int]:
    """Contents of blocks that are inserted nowhere, such as the lines of dimensions."""
    section = f.section("BLOCKS")
    inserted = {f.value(k, 2).lower() for k in (*f.section("ENTITIES"), *section) if f.kinds[k] == "INSERT"}
    out: set[int] = set()
    name = _LAYOUTS[0]
    for k in section:
        if f.kinds[k] in ("BLOCK", "ENDBLK"):
            name = f.value(k, 2).lower()
        elif (name not in inserted and name[:1] not in ("", "*")) or name[:2] == "*d":
            out.add(k)
    return out
