"""Names and texts that try to be more than data, and a job full of them."""

from pathlib import Path

import ezdxf

# what a DXF reader would take for a circle to cut, and what a browser or a shell would run
TAGS = "leaf\n0\nCIRCLE\n8\nCUT\n10\n7.0\n20\n7.0\n40\n3.5\n0\nTEXT"
MARKUP = "<script>document.title='ran'</script>"
NAMES = (
    "..", "../../noticed", "/noticed", "C:\\noticed", "con", "NUL.dxf", "x" * 300, "🦀 crab", "\u202egnp.evil", "שלום",
    "bell\x07\x1b[31mred\x1b[0m", "del\x7f\x85\u2028line", TAGS, MARKUP, "<img src=x onerror=document.title='ran'>",
    "</svg></title></style>" + MARKUP, "\"><svg onload=document.title='ran'>", "'onmouseover='document.title=1",
    "javascript:document.title='ran'", "]]><x>", "<!--", "&lt;b&gt;&#60;b&#62;", "{{ 7 * 7 }}", "{% include 'x' %}",
    "{0.__class__}", "%s%n%(x)s%%c%%d", "$HOME `id` $(id)", "=cmd|' /C calc'!A0", "+1+1", "-2+3", "@SUM(A1)", "\t=1",
    "a,b;c\"d\"", "'; DROP TABLE", "\\U+003Cscript>\\P{\\fArial;x}", "^J^M^ ", "#shape-part-1", "name?query#part",
    "trailing. ", "-rf", "~", "*", "0",
)  # fmt: skip
HEAD = """units = "mm"
process = "fibre-laser"
spacing = 4
"""


def drawing(path: Path, name: str) -> None:
    """A plate with a hole; layer, block, text and attribute carry `name`, and an image and a block lie elsewhere."""
    doc = ezdxf.new("R2010")
    doc.header["$INSUNITS"] = 4
    msp = doc.modelspace()
    at = {"layer": "PLACEHOLDER"}
    msp.add_lwpolyline([(0, 0), (60, 0), (60, 40), (0, 40)], close=True, dxfattribs=at)
    doc.blocks.new("BLOCKHOLDER").add_circle((20, 20), 6, dxfattribs=at)
    msp.add_blockref("BLOCKHOLDER", (0, 0))
    msp.add_text("TEXTHOLDER", height=3, dxfattribs=at).set_placement((5, 5))
    msp.add_mtext("4x M5 TEXTHOLDER", dxfattribs={"char_height": 2, "insert": (26, 20)})
    path.parent.mkdir(exist_ok=True)
    doc.saveas(path)
    line = name.replace("\r", "^M").replace("\n", "^J").encode("utf-8")
    raw = path.read_bytes()
    for holder in (b"PLACEHOLDER", b"BLOCKHOLDER", b"TEXTHOLDER"):
        raw = raw.replace(holder, line)
    path.write_bytes(raw)


def quoted(text: str) -> str:
    """A TOML string with everything unusual escaped."""
    return '"' + "".join(c if c.isascii() and c.isalnum() else f"\\U{ord(c):08X}" for c in text) + '"'


def hostile_job(folder: Path) -> Path:
    """A job whose every name, note and drawing is hostile."""
    folder.mkdir()
    lines = [f"name = {quoted('job ' + MARKUP)}", f"revision = {quoted('=1+1' + MARKUP)}", HEAD]
    lines += [
        "[[stock]]", f"name = {quoted('../stock' + MARKUP + TAGS)}", 'material = "mild-steel"', "thickness = 3",
        "length = 1000", "width = 500", 'count = "any"', "price_per_sheet = 20.0",
    ]  # fmt: skip
    for number, name in enumerate(NAMES):
        drawing(folder / "drawings" / f"{number}.dxf", name)
        lines += [
            "[[part]]", f'drawing = "drawings/{number}.dxf"', f"name = {quoted(name)}", 'material = "mild-steel"',
            "thickness = 3", "quantity = 1", f"note = {quoted(name)}",
        ]  # fmt: skip
    path = folder / "job.toml"
    path.write_text("\n".join(lines) + "\n")
    return path
