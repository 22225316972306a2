"""The page's list of files: whatever a person opens of the folder is there, and nothing that is not."""

import re
from pathlib import Path

from click.testing import CliRunner

from flatprep.cli.main import root
from tests.cli.test_jobs import JOB, leaf
from tests.drawing.draw import drawn


def listed(page: Path) -> dict[str, str]:
    """Return the files that the page links, with what it says of them."""
    links = re.findall(r'<a href="\./([^"]+)">[^<]*</a> <span class="soft">([^<]*)</span>', page.read_text())
    return dict(links)


def test_every_drawing_for_the_cutter_and_every_table_is_listed(tmp_path):
    drawn(tmp_path, leaf)
    job = tmp_path / "job.toml"
    job.write_text("tabs = true\n" + JOB)
    out = tmp_path / "out"
    words = ["prepare", job, "--out", out, "--steps", "5", "--also", "r12", "--also", "cut-only", "--also", "kerf"]
    done = CliRunner().invoke(root, [str(word) for word in words])
    assert done.exit_code in (0, 1), done.output
    found = listed(out / "report.html")
    assert set(found) == {path.name for path in out.iterdir() if path.suffix in (".dxf", ".csv")}
    assert found["sheet-01.dxf"] == "sheet 1, for the cutter"
    assert found["sheet-01-r12.dxf"] == "sheet 1, as DXF R12"
    assert found["estimate.csv"] == "mass and cost"
