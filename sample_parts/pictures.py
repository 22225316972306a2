"""Make the README's pictures from the sample job: `pictures/`.

    python sample_parts/pictures.py

The report's picture needs playwright and a Chromium; the others only flatprep.
"""

import os
import shutil
import tempfile
from pathlib import Path

from flatprep.api.lint import lint_paths
from flatprep.api.pieces import read_job
from flatprep.api.prepare import prepare_job, write_prepared
from flatprep.job.context import JobOptions
from flatprep.job.load import load_job
from flatprep.nest.problem import Budget
from flatprep.report.part_svg import part_pictures

SAMPLE = Path("sample_parts")  # seen from the folder above, so that pictures show no path of this machine
PICTURES = SAMPLE / "pictures"
BUDGET = Budget(seconds=20.0)
REMNANT = "wear-5-rest"


def part_picture() -> None:
    said = JobOptions(process="fibre-laser", material="al-6061-t6", thickness="6mm")
    (link,) = lint_paths([SAMPLE / "drawings" / "link_upper.dxf"], said).linted
    ((_, svg),) = part_pictures(link)
    (PICTURES / "part.svg").write_text(svg, encoding="utf-8")


def prepared(out: Path) -> None:
    """Prepare the job into `out`, and keep the picture of the remnant's sheet."""
    done = prepare_job(read_job(load_job(SAMPLE / "job.toml")), BUDGET)
    write_prepared(done, out)
    stocks = [sheet.stock for sheet in done.nested.layout.sheets]
    shutil.copy(out / f"sheet-{stocks.index(REMNANT) + 1:02}.svg", PICTURES / "sheet.svg")


def report_picture(out: Path) -> None:
    from playwright.sync_api import sync_playwright

    found = os.environ.get("FLATPREP_CHROMIUM") or shutil.which("chromium")
    with sync_playwright() as driver:
        browser = driver.chromium.launch(executable_path=found, args=["--no-sandbox"])
        page = browser.new_page(viewport={"width": 1060, "height": 640}, color_scheme="light")
        page.goto((out / "report.html").resolve().as_uri())
        card = page.locator(".part", has=page.get_by_role("heading", name="depth_quadrant"))
        card.evaluate("e => e.scrollIntoView()")
        card.locator("tr[data-mark=f1]").hover()
        page.screenshot(path=PICTURES / "report.png")
        browser.close()


def main() -> None:
    os.chdir(Path(__file__).parent.parent)
    PICTURES.mkdir(exist_ok=True)
    part_picture()
    with tempfile.TemporaryDirectory() as folder:
        prepared(Path(folder))
        report_picture(Path(folder))


if __name__ == "__main__":
    main()
