"""Pictures of checked parts as files: one SVG a part."""

from pathlib import Path

from flatprep.base.files import make_folder, write_whole
from flatprep.base.safe_names import safe_stem
from flatprep.model.linted import LintReport
from flatprep.report.part_svg import part_pictures


def write_pictures(report: LintReport, folder: Path) -> tuple[Path, ...]:
    """Draw every part with its findings into `folder`, named after the part; a name that is taken gets a number.

    Returns
    -------
    tuple of Path
        The files, in the order of the report.

    Raises
    ------
    OutputError
        When the folder cannot be written into.
    """
    make_folder(folder)
    written: dict[Path, None] = {}  # a dict keeps the order
    for one in report.linted:
        for name, svg in part_pictures(one):
            file = _free(folder / f"{safe_stem(name)}.svg", written)
            write_whole(file, svg)
            written[file] = None
    return tuple(written)


def _free(wanted: Path, taken: dict[Path, None]) -> Path:
    file, number = wanted, 1
    while file in taken:
        number += 1
        file = wanted.with_name(f"{wanted.stem}-{number}.svg")
    return file
