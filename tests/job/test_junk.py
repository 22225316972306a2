"""Whatever stands in a job, a cut list or a profile: one clear error or a good value, never anything else."""

import copy
import tomllib
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from flatprep.base.errors import FlatprepError
from flatprep.job import load
from flatprep.job.cutlist import CutRow, load_cutlist
from flatprep.job.values import Job
from flatprep.profile.material_load import parse_material
from flatprep.profile.process_load import parse_process
from flatprep.profile.where import SHIPPED
from tests.job.write import FULL, write_job

JUNK = st.recursive(
    st.one_of(
        st.none().map(lambda _: tomllib.loads("x = 2026-12-01")["x"]),
        st.booleans(),
        st.integers(-(10**20), 10**20),
        st.floats(),
        st.text(max_size=8),
        st.sampled_from(["open", "any", "free", "16ga", "1/0in", "../../x", "", "\x00", "-3", "nan", "A", "mm"]),
    ),
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(st.text(max_size=6), inner, max_size=3),
    max_leaves=6,
)


def spoil(data, draw, times):
    """Replace, add or take away something somewhere, a few times."""
    data = copy.deepcopy(data)
    for _ in range(times):
        at = data
        while True:
            keys = list(at) if isinstance(at, dict) else list(range(len(at)))
            if not keys:
                break
            key = draw(st.sampled_from(keys))
            inner = at[key]
            if isinstance(inner, dict | list) and inner and draw(st.booleans()):
                at = inner
                continue
            what = draw(st.sampled_from(["replace", "replace", "remove", "add"]))
            if what == "remove":
                del at[key]
            elif what == "add" and isinstance(at, dict):
                at[draw(st.text(max_size=6))] = draw(JUNK)
            else:
                at[key] = draw(JUNK)
            break
    return data


def answer(call, *given):
    """What a call gives, and the message of our own error if it gives one instead."""
    try:
        return call(*given), ""
    except FlatprepError as err:
        return None, err.message


HOUSE = settings(max_examples=150, suppress_health_check=[HealthCheck.function_scoped_fixture, HealthCheck.too_slow])


@HOUSE
@given(data=st.data())
def test_jobs(tmp_path, monkeypatch, data):
    path = write_job(tmp_path, FULL)
    spoilt = spoil(tomllib.loads(FULL), data.draw, data.draw(st.integers(1, 3)))
    monkeypatch.setattr(load, "read_toml", lambda *_: spoilt)
    job, message = answer(load.load_job, path)
    if job is None:
        assert str(path) in message
        assert len(message) < 600
    else:
        assert isinstance(job, Job)
        assert all(part.quantity + part.quantity_opposite > 0 for part in job.parts)


@pytest.mark.parametrize("file", sorted(SHIPPED.glob("processes/*.toml")), ids=lambda f: f.stem)
@settings(max_examples=40)
@given(data=st.data())
def test_processes(file, data):
    spoilt = spoil(tomllib.loads(file.read_text()), data.draw, data.draw(st.integers(1, 3)))
    process, message = answer(parse_process, spoilt, "p.toml", "p")
    if process is None:
        assert message.startswith("p.toml")
    else:
        limit = process.limit("hole", "aluminium", 3.0)
        assert limit is None or limit.warn is None or limit.warn >= limit.error >= 0.0


@pytest.mark.parametrize("name", ["al-6061-t6", "pvc", "birch-ply"])
@settings(max_examples=40)
@given(data=st.data())
def test_materials(name, data):
    text = (SHIPPED / "materials" / f"{name}.toml").read_text()
    spoilt = spoil(tomllib.loads(text), data.draw, data.draw(st.integers(1, 3)))
    material, message = answer(parse_material, spoilt, "m.toml", "m")
    if material is None:
        assert message.startswith("m.toml")
    else:
        assert material.density_kg_m3 is None or material.density_kg_m3 > 0.0


@HOUSE
@given(raw=st.binary(max_size=200) | st.text(max_size=200).map(str.encode))
def test_cut_lists(tmp_path, raw):
    file = tmp_path / "cutlist.csv"
    file.write_bytes(raw)
    lines_up(file)


CELLS = st.text(st.characters(exclude_categories=["Cs"]), max_size=6)


@HOUSE
@given(
    rows=st.lists(st.lists(CELLS, min_size=4, max_size=5), min_size=1, max_size=4), separator=st.sampled_from(",;\t")
)
def test_cut_lists_under_a_good_header(tmp_path, rows, separator):
    file = tmp_path / "cutlist.csv"
    head = separator.join(("file", "material", "thickness", "quantity"))
    file.write_text("\n".join([head, *(separator.join(row) for row in rows)]), encoding="utf-8", newline="")
    lines_up(file)


def lines_up(file: Path) -> None:
    rows, message = answer(load_cutlist, file)
    if rows is None:
        assert str(file) in message
    else:
        assert rows
        assert all(isinstance(row, CutRow) and row.file and row.quantity >= 0 for row in rows)
