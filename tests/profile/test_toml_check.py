"""Strict TOML: each mistake names file, key, value and what is allowed."""

import os

import pytest

from flatprep.base.errors import JobError, ProfileError
from flatprep.profile.toml_check import MOST_BYTES, Table, read_toml


def table(**data):
    return Table(data, "f.toml", "part 1")


def test_good_values_come_back_as_they_are():
    t = table(a="x", b=2, c=[1, 2.5], d=["p"], e=True, f={"g": 1}, h=[{"i": 1}], j=[[0, 1], [2, 3]], k="1/8in")
    assert t.text("a") == "x"
    assert t.number("b") == 2.0
    assert t.integer("b") == 2
    assert t.numbers("c") == (1.0, 2.5)
    assert t.texts("d") == ("p",)
    assert t.flag("e") is True
    assert t.table("f").number("g") == 1.0
    assert [x.number("i") for x in t.tables("h")] == [1.0]
    assert t.pairs("j") == ((0.0, 1.0), (2.0, 3.0))
    assert t.length_mm("k") == pytest.approx(3.175, rel=1e-12)
    assert t.length_mm("b", unit="in") == pytest.approx(50.8, rel=1e-12)


def test_defaults_where_a_key_is_not_there():
    t = table()
    assert t.text("a", "z") == "z"
    assert t.optional_text("a") is None
    assert t.number("a", 1.5) == 1.5
    assert t.optional_number("a") is None
    assert t.integer("a", 3) == 3
    assert t.flag("a") is False
    assert t.optional_flag("a") is None
    assert t.choice("a", ("x",), "x") == "x"
    assert t.texts("a") == t.numbers("a") == t.pairs("a") == t.tables("a") == ()
    assert t.table("a") is None
    assert t.named_tables("a") == {}
    assert t.length_mm("a", 2.0) == 2.0


@pytest.mark.parametrize(
    ("value", "read", "allowed"),
    [
        (3, lambda t: t.text("k"), "a text in quotes"),
        ("  ", lambda t: t.text("k"), "a text in quotes"),
        ("3", lambda t: t.number("k"), "a number"),
        (True, lambda t: t.number("k"), "a number"),
        (float("nan"), lambda t: t.number("k"), "a number"),
        (float("inf"), lambda t: t.number("k"), "a number"),
        (10**400, lambda t: t.number("k"), "a number"),
        (-0.1, lambda t: t.number("k", least=0.0), "a number of 0 or more"),
        (0, lambda t: t.number("k", above=0.0), "a number above 0"),
        (1.5, lambda t: t.integer("k"), "a whole number"),
        (True, lambda t: t.integer("k"), "a whole number"),
        (-1, lambda t: t.integer("k"), "a whole number from 0"),
        (0, lambda t: t.integer("k", least=1), "a whole number from 1"),
        (1, lambda t: t.flag("k"), "true or false"),
        ("up", lambda t: t.choice("k", ("left", "right")), 'one of "left", "right"'),
        ("x", lambda t: t.texts("k"), "a list of texts"),
        ([1], lambda t: t.texts("k"), "a list of texts"),
        (3, lambda t: t.numbers("k"), "a list of numbers"),
        (["a"], lambda t: t.numbers("k"), "a number"),
        ([1, 2, 3], lambda t: t.numbers("k", count=2), "a list of 2 numbers"),
        ([1, 2], lambda t: t.pairs("k"), "a list of pairs"),
        ([[1, "a"]], lambda t: t.pairs("k"), "a number"),
        (3, lambda t: t.table("k"), "a table"),
        ({}, lambda t: t.tables("k"), "a list of tables"),
        ([3], lambda t: t.tables("k"), "a list of tables"),
        ("3 furlongs", lambda t: t.length_mm("k"), "a length"),
        ([3], lambda t: t.length_mm("k"), "a number"),
        ("-3mm", lambda t: t.length_mm("k", least=0.0), "a number of 0 or more"),
        (1e308, lambda t: t.length_mm("k", unit="m"), "a length of 10 km at the most"),
        ("1e9mm", lambda t: t.length_mm("k"), "a length of 10 km at the most"),
        (-10001, lambda t: t.length_mm("k", unit="m"), "a length of 10 km at the most"),
    ],
)
def test_wrong_values(value, read, allowed):
    with pytest.raises(ProfileError) as caught:
        read(table(k=value))
    assert caught.value.message.startswith("f.toml: part 1: k = ")
    assert f"must be {allowed}" in caught.value.message


@pytest.mark.parametrize(
    "read",
    [
        lambda t: t.text("k"),
        lambda t: t.number("k"),
        lambda t: t.integer("k"),
        lambda t: t.length_mm("k"),
        lambda t: t.choice("k", ("a",)),
    ],
)
def test_missing_values(read):
    with pytest.raises(ProfileError, match=r"f\.toml: part 1: k is missing") as caught:
        read(table())
    assert caught.value.remedy.startswith("add k = ")


def test_unknown_key_names_value_place_and_the_nearest():
    with pytest.raises(JobError) as caught:
        Table({"quantty": 3}, "job.toml", "part 2", JobError).only(("quantity", "name"))
    assert caught.value.message == "job.toml: part 2: unknown key quantty = 3"
    assert caught.value.remedy == 'did you mean "quantity"? (allowed here: name, quantity)'


def test_near_miss_of_a_choice_is_named():
    with pytest.raises(ProfileError) as caught:
        table(k="lasser").choice("k", ("laser", "router"))
    assert caught.value.remedy == 'did you mean "laser"?'


def test_long_values_are_cut_short():
    with pytest.raises(ProfileError) as caught:
        table(k=[1] * 1000).text("k")
    assert len(caught.value.message) < 140


def test_inner_tables_say_where_they_are():
    inner = table(work=[{}, {"hole": "x"}]).tables("work")[1]
    assert inner.place == "f.toml: part 1, work 2"


@pytest.mark.parametrize(
    ("raw", "words"),
    [
        (b"a = ", "is not TOML"),
        (b"a = 1\na = 2", "is not TOML"),
        (b"\xff\xfea", "is not UTF-8"),
        (b"a = " + b"9" * 6000, "is not TOML"),
        (b"a = " + b"[" * 3000 + b"]" * 3000, "nested too deeply"),
    ],
)
def test_files_that_are_no_toml(tmp_path, raw, words):
    file = tmp_path / "f.toml"
    file.write_bytes(raw)
    with pytest.raises(ProfileError, match=words):
        read_toml(file)


def test_files_that_are_not_there(tmp_path):
    with pytest.raises(JobError, match="no such file"):
        read_toml(tmp_path / "no.toml", JobError)
    with pytest.raises(ProfileError, match="is no file"):
        read_toml(tmp_path)
    os.mkfifo(tmp_path / "pipe.toml")  # reading it would wait for ever
    with pytest.raises(ProfileError, match="is no file"):
        read_toml(tmp_path / "pipe.toml")


def test_files_too_large_to_be_meant(tmp_path):
    file = tmp_path / "f.toml"
    file.write_bytes(b"a = 1\n" + b"#" * MOST_BYTES)
    with pytest.raises(ProfileError, match="is larger than 10 MB"):
        read_toml(file)


def test_files_that_may_not_be_read(tmp_path, monkeypatch):
    file = tmp_path / "f.toml"
    file.touch()

    def refuse(path):
        raise PermissionError(13, "Permission denied")

    monkeypatch.setattr(type(file), "read_bytes", refuse)
    with pytest.raises(ProfileError, match=r"cannot be read \(Permission denied\)"):
        read_toml(file)


def test_byte_order_mark_and_dos_line_ends(tmp_path):
    file = tmp_path / "f.toml"
    file.write_bytes(b"\xef\xbb\xbfa = 1\r\nb = 2\r\n")
    assert read_toml(file) == {"a": 1, "b": 2}
