"""What is said of a drawing on which its worker gave up."""

from pathlib import Path

from flatprep.api.given_up import given_up
from flatprep.base.workers import Lost


def test_the_remedy_asks_for_a_plainer_drawing_or_for_a_report():
    slow = given_up(Path("a.dxf"), Lost("it took more than 20 s"))
    assert (slow.message, slow.remedy) == (
        "a.dxf: given up, it took more than 20 s",
        "export a plainer drawing of the part",
    )
    odd = given_up(Path("a.dxf"), Lost("a mistake of this program (ValueError: x)", unforeseen=True))
    assert odd.remedy == "report it together with the drawing"
