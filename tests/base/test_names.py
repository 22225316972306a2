"""Names compared as people write them, and what was meant by a misspelt one."""

import pytest

from flatprep.base.names import did_you_mean, nearest, plain


@pytest.mark.parametrize("text", ["EN AW-5052", "en_aw 5052", "EN.AW/5052", "ＥＮ　ＡＷ－５０５２", "enaw5052"])
def test_one_designation_in_many_spellings(text):
    assert plain(text).replace("　", "").replace("－", "") == "enaw5052"


def test_the_likeliest_name_comes_first():
    assert nearest("quantty", ["quantity", "quantity_opposite", "thickness"])[0] == "quantity"


def test_a_part_of_a_name_finds_it():
    assert nearest("5052", ["al-5052-h32", "al-6061-t6"]) == ("al-5052-h32",)


def test_nothing_near_gives_nothing():
    assert nearest("zzz", ["quantity", "thickness"]) == ()
    assert nearest("", ["quantity"]) == ()


def test_remedy_names_the_nearest_or_the_known():
    assert did_you_mean("rooter", ["router", "plasma"]) == 'did you mean "router"?'
    assert did_you_mean("zzz", ["router", "plasma"]) == "known: plasma, router"
    assert did_you_mean("zzz", [f"n{i:02d}" for i in range(20)]).endswith("n11, ...")
    assert did_you_mean("zzz", []) == "none is known"
