"""Cut lists as spreadsheets write them."""

import pytest

from flatprep.base.errors import JobError
from flatprep.job.cutlist import CutRow, find_cutlist, load_cutlist

PLAIN = "file,material,thickness,quantity\nleaf.dxf,al-5052-h32,3,12\n"
LEAF = CutRow("leaf.dxf", "al-5052-h32", "3", 12, line=2)


def rows(tmp_path, raw):
    file = tmp_path / "cutlist.csv"
    file.write_bytes(raw if isinstance(raw, bytes) else raw.encode())
    return load_cutlist(file)


@pytest.mark.parametrize(
    "raw",
    [
        PLAIN,
        PLAIN.rstrip("\n"),
        PLAIN.replace("\n", "\r\n"),
        PLAIN.replace("\n", "\r"),
        b"\xef\xbb\xbf" + PLAIN.encode(),
        PLAIN.encode("utf-16"),
        PLAIN.replace(",", ";"),
        PLAIN.replace(",", "\t"),
        PLAIN.replace("file", "File ").replace("thickness", " THICKNESS"),
        'file,material,thickness,quantity,\n"leaf.dxf", al-5052-h32 ,3,12,\n\n,,,,\n',
        "file;material;thickness;quantity\nleaf.dxf;al-5052-h32;3;12,0\n",
    ],
    ids=["plain", "no-last-end", "crlf", "cr", "bom", "utf16", "semicolon", "tab", "heads", "blanks", "12,0"],
)
def test_ways_of_writing_the_same_list(tmp_path, raw):
    assert rows(tmp_path, raw) == (LEAF,)


def test_optional_columns_in_any_order(tmp_path):
    found = rows(
        tmp_path,
        "note,quantity_opposite,file,revision,quantity,material,thickness,name\n"
        '"a, b",2,sub\\leaf.dxf,C,,hdpe,1/4in,left\n',
    )
    assert found == (CutRow("sub/leaf.dxf", "hdpe", "1/4in", 1, 2, "C", "a, b", "left", 2),)


def test_comments_and_line_numbers(tmp_path):
    text = "# made by hand\nfile,material,thickness,quantity\n\n# later: x.dxf\na.dxf,,,\nb.dxf,hdpe,16ga,0\n"
    assert [(r.file, r.quantity, r.line) for r in rows(tmp_path, text)] == [("a.dxf", 1, 5), ("b.dxf", 0, 6)]


@pytest.mark.parametrize(("thickness", "separator"), [("6,5 mm", ";"), ("6,5", "\t"), ('"6,5 mm"', ",")])
def test_a_decimal_comma(tmp_path, thickness, separator):
    text = separator.join(("file", "material", "thickness", "quantity")) + "\n"
    text += separator.join(("a.dxf", "birch-ply", thickness, "1"))
    assert rows(tmp_path, text)[0].thickness == thickness.strip('"').replace(",", ".")


def test_western_letters_of_an_older_spreadsheet(tmp_path):
    raw = "file,material,thickness,quantity\nbügel.dxf,hdpe,3,1\n".encode("cp1252")
    assert rows(tmp_path, raw)[0].file == "bügel.dxf"


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("", "is empty"),
        ("\n\n", "is empty"),
        ("file,material,thickness,quantity\n", "no row below its header"),
        ("file,material,thickness\na.dxf,hdpe,3\n", "line 1: column quantity is missing"),
        ("file,file,material,thickness,quantity\na,a,b,3,1\n", "line 1: column file stands twice"),
        ("file,material,thicknes,quantity\na.dxf,hdpe,3,1\n", 'line 1: unknown column "thicknes"'),
        ("a.dxf,hdpe,3,1\n", 'line 1: unknown column "a.dxf"'),
        (PLAIN + ",hdpe,3,1\n", "line 3: file is empty"),
        (PLAIN + "a.dxf,hdpe,3,-1\n", 'line 3: quantity = "-1"'),
        (PLAIN + "a.dxf,hdpe,3,1.5\n", 'line 3: quantity = "1.5"'),
        (PLAIN + "a.dxf,hdpe,3,two\n", 'line 3: quantity = "two"'),
        (PLAIN + "a.dxf,hdpe,3,99999999\n", 'line 3: quantity = "99999999"'),
        (PLAIN + "a.dxf,hdpe,3,1,extra\n", "line 3: 5 cells for 4 columns"),
        (PLAIN + '"a.dxf,hdpe,3,1\n', "line 3"),
    ],
)
def test_mistakes_name_file_and_line(tmp_path, text, words):
    with pytest.raises(JobError) as caught:
        rows(tmp_path, text)
    assert str(tmp_path / "cutlist.csv") in caught.value.message
    assert words in caught.value.message


def test_a_misspelt_column_gets_the_nearest(tmp_path):
    with pytest.raises(JobError) as caught:
        rows(tmp_path, "file,material,thicknes,quantity\na.dxf,hdpe,3,1\n")
    assert caught.value.remedy.startswith('did you mean "thickness"')


def test_a_list_that_cannot_be_read(tmp_path):
    with pytest.raises(JobError, match="is no file"):
        load_cutlist(tmp_path)
    with pytest.raises(JobError, match="cannot be read"):
        load_cutlist(tmp_path / "none.csv")


def test_finding_it_in_any_case(tmp_path):
    assert find_cutlist(tmp_path) is None
    (tmp_path / "CutList.CSV").touch()
    assert find_cutlist(tmp_path) == tmp_path / "CutList.CSV"
    (tmp_path / "cutlist.csv").touch()
    assert find_cutlist(tmp_path) == tmp_path / "cutlist.csv"
