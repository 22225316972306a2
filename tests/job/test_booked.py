"""The book of a rack."""

import tomllib
from dataclasses import replace
from datetime import date

import pytest

from flatprep.base.errors import JobError
from flatprep.job.booked import Booking, load_bookings, with_bookings

ONE = Booking(date(2026, 3, 14), 'gate "A" \\ é', "3f2a91c07b12", 2, "al3", "stock.toml", "R0001")
TWO = Booking(date(2026, 3, 15), "", "3f2a91c07b12", 3, "own")


def test_what_is_written_is_read_again_and_what_stood_there_stays(tmp_path):
    assert load_bookings(tmp_path) == ()
    first = with_bookings("", [ONE])
    (tmp_path / "booked.toml").write_text(first + "# cut by hand\n# ...", encoding="utf-8")
    text = with_bookings((tmp_path / "booked.toml").read_text(encoding="utf-8"), [TWO])
    (tmp_path / "booked.toml").write_text(text, encoding="utf-8")
    assert load_bookings(tmp_path) == (ONE, TWO)
    assert text.startswith(first)
    assert "# cut by hand" in text


def test_any_name_gives_toml():
    odd = replace(ONE, job="a\x7f\n\x01\u2028")
    assert tomllib.loads(with_bookings("", [odd]))["booked"][0]["job"] == odd.job


@pytest.mark.parametrize(
    ("line", "words"),
    [('date = "14 March"', "date = "), ("sheet = 0", "sheet = 0"), ("colour = 1", "unknown key colour")],
)
def test_mistakes_are_named(tmp_path, line, words):
    key = line.split(" ")[0]
    lines = {"date": "date = 2026-03-14", "layout": 'layout = "x"', "sheet": "sheet = 1", "stock": 'stock = "a"'}
    (tmp_path / "booked.toml").write_text("[[booked]]\n" + "\n".join((lines | {key: line}).values()))
    with pytest.raises(JobError, match=f"booked.toml: booked 1: {words}"):
        load_bookings(tmp_path)
