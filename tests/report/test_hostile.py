"""A job full of names and drawings that try to be more than data, through `prepare`: they stay data."""

import csv
import json
import re
import subprocess
import sys
import unicodedata
from collections import Counter
from html.parser import HTMLParser
from pathlib import Path
from urllib.parse import unquote
from xml.etree import ElementTree

import ezdxf
import pytest

from tests.hostile import NAMES

LAYERS = {"CUT", "MARK", "BEND", "SHEET", "NOTE"}


def files(folder: Path, suffix: str) -> list[Path]:
    found = sorted(folder.rglob(f"*{suffix}"))
    assert found
    return found


def test_every_part_is_there_and_file_names_are_plain(hostile):
    layout = json.loads((hostile / "layout.json").read_text())
    assert Counter(p["part"] for s in layout["sheets"] for p in s["placements"]).total() == len(NAMES)
    assert layout["unplaced"] == []
    assert len(files(hostile / "bench", ".html")) == len(NAMES)
    for path in hostile.rglob("*"):
        assert re.fullmatch(r"[A-Za-z0-9_#.-]{1,100}", path.name), path
        assert path.name[0] not in "-."


def test_the_cutter_gets_only_the_parts(hostile):
    cut = Counter()
    for path in files(hostile, ".dxf"):
        doc = ezdxf.readfile(path)
        assert doc.audit().errors == []
        if path.stem.endswith("-rest"):  # what is left of a sheet, for the next job
            continue
        assert {e.dxf.layer for e in doc.modelspace()} <= LAYERS
        cut.update((e.dxftype(), getattr(e.dxf, "radius", None)) for e in doc.modelspace().query('*[layer=="CUT"]'))
        assert {e.dxftype() for e in doc.modelspace().query('*[layer=="NOTE"]')} == {"TEXT"}
    # plates of one hole each
    assert cut == {("LWPOLYLINE", None): len(NAMES), ("CIRCLE", 6.0): len(NAMES)}


def test_pictures_are_sound_and_hold_nothing_that_runs(hostile):
    for path in files(hostile, ".svg"):
        for element in ElementTree.parse(path).iter():
            assert element.tag.rpartition("}")[2] in {
                "svg",
                "title",
                "desc",
                "defs",
                "g",
                "path",
                "rect",
                "text",
                "use",
                "line",
            }
            assert not [name for name in element.attrib if name.lower().startswith("on")]
            assert not [v for name, v in element.attrib.items() if name.endswith("href") and not v.startswith("#")]


class Page(HTMLParser):
    """Elements, attributes and links of a page."""

    def __init__(self, text: str) -> None:
        super().__init__()
        self.elements, self.handlers, self.links = Counter(), [], []
        self.feed(text)

    def handle_starttag(self, tag, attrs):
        self.elements[tag] += 1
        self.handlers += [name for name, _ in attrs if name.startswith("on")]
        self.links += [value for name, value in attrs if name in ("href", "src", "action")]


def test_pages_hold_our_script_and_no_other_and_link_only_to_what_is_there(hostile):
    for path in files(hostile, ".html"):
        page = Page(path.read_text())
        assert page.elements["script"] == 1
        assert not {"img", "iframe", "object", "embed", "base", "foreignobject"} & set(page.elements)
        assert page.handlers == []
        for link in page.links:
            assert link.startswith(("#", "./", "data:image/")), link
            if link.startswith("./"):
                assert (path.parent / unquote(link)).is_file(), link


def test_no_cell_is_a_formula(hostile):
    for path in files(hostile, ".csv"):
        with path.open(newline="", encoding="utf-8") as lines:
            for row in csv.reader(lines):
                for cell in row:
                    assert not re.match(r"[=@\t\r]|[+-](?![\d.]+(e[+-]?\d+)?$)", cell), (path, cell)


def test_documents_are_sound_and_nothing_drives_the_terminal(hostile):
    for path in files(hostile, ".json"):
        json.loads(path.read_text(encoding="utf-8"))
    said = (hostile.parent / "said").read_text(encoding="utf-8")
    assert not [c for c in said if unicodedata.category(c) == "Cc" and c != "\n"]


def test_lint_text_of_hostile_layers_and_file_names_drives_no_terminal(hostile):
    evil = hostile.parent / "evil"
    evil.mkdir()
    for number, name in enumerate(("a\x1b[2Jb.dxf", "line\nfeed.dxf", "=1+1.dxf", "-rf.dxf", "\u202efxd.dxf")):
        (evil / name).write_bytes((hostile.parent / "in" / "drawings" / f"{number + 8}.dxf").read_bytes())
    run = subprocess.run([sys.executable, "-m", "flatprep", "lint", str(evil)], capture_output=True, check=False)
    assert run.returncode == 1
    said = (run.stdout + run.stderr).decode()
    assert not [c for c in said if unicodedata.category(c) == "Cc" and c != "\n"]


def test_drawings_are_never_fetched_or_opened_from_drawings(tmp_path):
    """An external reference, an image and an underlay: named as not used, not opened."""
    if not hasattr(sys, "addaudithook"):
        pytest.skip("this Python tells nobody what it opens")
    path = outside(tmp_path)
    code = (
        "import sys\nfrom pathlib import Path\nopened = []\n"
        "watched = ('open', 'socket.connect', 'os.listdir')\n"
        "sys.addaudithook(lambda event, what: opened.append(str(what[0])) if event in watched else None)\n"
        "from flatprep.api.lint import LintTask, lint_one\n"
        "one = lint_one(LintTask(Path(sys.argv[1])))\n"
        "assert one.drawing.parts, one\n"
        "print([p for p in opened if 'noticed' in p], sorted((s.kind, s.reason) for s in one.drawing.skipped))"
    )
    run = subprocess.run([sys.executable, "-c", code, str(path)], capture_output=True, text=True, check=True)
    opened, _, skipped = run.stdout.partition("] ")
    assert opened == "["
    for kind, words in (("IMAGE", "not opened"), ("PDFUNDERLAY", "not opened"), ("INSERT", "another file: not opened")):
        assert re.search(rf"'{kind}', '[^']*{words}", skipped), skipped


def outside(folder: Path) -> Path:
    (folder / "noticed.dxf").write_text("not to be read")
    (folder / "noticed.png").write_bytes(b"not to be read")
    doc = ezdxf.new("R2010")
    doc.header["$INSUNITS"] = 4
    msp = doc.modelspace()
    msp.add_lwpolyline([(0, 0), (60, 0), (60, 40), (0, 40)], close=True)
    doc.add_xref_def(str(folder / "noticed.dxf"), "AWAY")
    msp.add_blockref("AWAY", (0, 0))
    image = doc.add_image_def(str(folder / "noticed.png"), (100, 100))
    msp.add_image(image, (0, 0), (10, 10))
    underlay = doc.add_underlay_def(str(folder / "noticed.pdf"), fmt="pdf", name="1")
    msp.add_underlay(underlay, (0, 0))
    doc.saveas(folder / "plate.dxf")
    return folder / "plate.dxf"
