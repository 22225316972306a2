"""What is said of a drawing on which its worker gave up."""

from pathlib import Path

from flatprep.base.errors import DrawingError
from flatprep.base.workers import Lost


def given_up(path: Path, lost: Lost) -> DrawingError:
    """Return the error for a drawing without a result; for a mistake of this program it asks for a report."""
    remedy = "report it together with the drawing" if lost.unforeseen else "export a plainer drawing of the part"
    return DrawingError(f"{path}: given up, {lost.why}", remedy)
