"""The tables of keys in the README, made from the rows that the readers take their keys from.

    python -m tests.docs.reference

writes them anew: each stands under a comment that names it. What else the README says stays as it is.
"""

import re
from collections.abc import Sequence
from pathlib import Path

from flatprep.base.keys import Row
from flatprep.job import reference as job
from flatprep.profile import reference as profile

README = Path(__file__).parents[2] / "README.md"
TABLES = {
    "job": job.TOP,
    "[[stock]]": job.STOCK,
    "[[part]]": job.PART,
    "[[part.work]]": job.WORK,
    "[[part.bend]]": job.BEND,
    "[[joint]]": job.JOINT,
    "[[joint.through]]": job.LAYER,
    "[cost]": job.COST,
    "rack": job.RACK,
    "process": profile.PROCESS,
    "material": profile.MATERIAL,
}
_PLACE = re.compile(r"(<!-- keys: (.+?) -->\n\n)((?:\|[^\n]*\n)*)")


def table(rows: Sequence[Row]) -> str:
    """Return the Markdown table of some keys; a column of defaults only where there is one."""
    shown = any(row.default for row in rows)
    lines = [["key", "meaning", "default"], ["---"] * 3]
    lines += [[", ".join(f"`{key}`" for key in row.keys), row.meaning, row.default] for row in rows]
    cells = [[f" {cell} " if cell else " " for cell in line[: 3 if shown else 2]] for line in lines]
    return "".join(f"|{'|'.join(line)}|\n" for line in cells)


def made_anew(text: str) -> str:
    """Return the README with every table as the code has it."""
    return _PLACE.sub(lambda found: found[1] + table(TABLES[found[2]]), text)


def named(text: str) -> list[str]:
    """Return the names of the tables in the README, in its order."""
    return [found[2] for found in _PLACE.finditer(text)]


if __name__ == "__main__":
    README.write_text(made_anew(README.read_text(encoding="utf-8")), encoding="utf-8")
