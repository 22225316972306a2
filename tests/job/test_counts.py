"""Counts in a stock.toml, changed where they stand."""

import tomllib
from pathlib import Path

import pytest

from flatprep.base.errors import JobError
from flatprep.job.counts import Kept, load_kept, with_counts

PATH = Path("stock.toml")
TEXT = """# spring
units = "in"

[[stock]]                 # by the door
name = "one"
count = 12                # counted in May
keep_out = [
  [0, 0, 60, 60],
]
[[stock]]
name = "two"

[[ stock ]]
count = "any"
name = "three"
  [[stock]]
  name = "four"
  keep_out = [[0, 0, 1, 1]]
  count=1_000
"""


@pytest.mark.parametrize(
    ("name", "before", "after"),
    [
        ("one", "count = 12                # counted", "count = 11                # counted"),
        ("two", '[[stock]]\nname = "two"', '[[stock]]\ncount = 11\nname = "two"'),
        ("four", "count=1_000", "count=11"),
    ],
)
@pytest.mark.parametrize("end", ["\n", "\r\n"])
@pytest.mark.parametrize("mark", ["", "\ufeff"])
def test_only_the_figure_changes(name, before, after, end, mark):
    text = mark + TEXT.replace("\n", end)
    wanted = text.replace(before.replace("\n", end), after.replace("\n", end), 1)
    assert with_counts(PATH, text, {name: 11}) == wanted


def test_several_at_once():
    data = tomllib.loads(with_counts(PATH, TEXT, {"one": 0, "two": 5, "four": 7}))
    assert [s.get("count") for s in data["stock"]] == [0, 5, "any", 7]


@pytest.mark.parametrize(
    "text",
    [
        'stock = [{name = "one", count = 3}]\n',
        '[[stock]]\nname = "one"\ncount = 0x10\n',
        '[[stock]]\nname = "one"\nnote = """\ncount = 3\n"""\n"count" = 3\n',
    ],
    ids=["inline", "hexadecimal", "in-a-text"],
)
def test_what_cannot_be_changed_safely_is_left(text):
    with pytest.raises(JobError, match=r'stock\.toml: the count of "one" cannot be changed where it stands'):
        with_counts(PATH, text, {"one": 2})


def test_what_a_rack_keeps(tmp_path):
    assert load_kept(tmp_path / "stock.toml") == Kept()
    (tmp_path / "stock.toml").write_text(
        'units = "in"\noffcut_least = [8, "100mm"]\n'
        '[[stock]]\nname = "a"\n[[stock]]\nname = "b"\ncount = "any"\n'
        '[[stock]]\nname = "c"\nlength = "open"\ncount = 2\n[[stock]]\nname = "d"\ncount = 0\n'
    )
    kept = load_kept(tmp_path / "stock.toml")
    assert kept.counts == {"a": 1, "b": None, "c": None, "d": 0}
    assert kept.offcut_least_mm == pytest.approx((203.2, 100.0))
