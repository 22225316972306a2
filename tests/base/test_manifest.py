"""What an earlier run wrote and this one does not goes; nothing else does."""

import hashlib
import re

import pytest

from flatprep.base.files import write_together
from flatprep.base.manifest import MANIFEST, with_manifest


def run(folder, **files):
    (folder / "bench").mkdir(exist_ok=True)
    named = [(folder / name.replace("__", "/"), text) for name, text in files.items()]
    write_together(with_manifest(folder, named))
    return sorted(p.relative_to(folder).as_posix() for p in folder.rglob("*") if p.is_file() and p.name != MANIFEST)


def test_what_is_not_written_again_goes(tmp_path):
    assert run(tmp_path, report="a", bench__old="b", bench__new="c") == ["bench/new", "bench/old", "report"]
    assert run(tmp_path, report="a", bench__new="c") == ["bench/new", "report"]
    assert run(tmp_path, report="a") == ["report"]


def test_what_somebody_changed_or_put_there_stays(tmp_path):
    run(tmp_path, report="a", bench__old="b", bench__older="c")
    (tmp_path / "bench" / "old").write_text("b, and a note by hand")
    (tmp_path / "bench" / "mine").write_text("mine")
    assert run(tmp_path, report="a") == ["bench/mine", "bench/old", "report"]
    assert run(tmp_path, report="a") == ["bench/mine", "bench/old", "report"]


@pytest.mark.parametrize("name", ["../outside", "{outside}", "link", "bench"])
def test_a_list_that_was_tampered_with_takes_nothing_outside(tmp_path, name):
    outside, folder = tmp_path / "outside", tmp_path / "out"
    outside.write_text("b")
    folder.mkdir()
    run(folder, report="b")
    (folder / "link").symlink_to(outside)
    (digest,) = re.findall("([0-9a-f]+)  report", (folder / MANIFEST).read_text())
    (folder / MANIFEST).write_text(f"{digest}  {name.format(outside=outside)}\n")
    run(folder, report="b")
    assert outside.read_text() == "b"
    assert (folder / "link").is_symlink()


@pytest.mark.parametrize("text", ["", "[]", "bench/old\n", "0123  bench/old\n", "\x00", f"{64 * '0'}  bench/old\n"])
def test_a_list_that_is_none_is_no_trouble(tmp_path, text):
    run(tmp_path, report="a", bench__old="b")
    (tmp_path / MANIFEST).write_text(text)
    assert run(tmp_path, report="a") == ["bench/old", "report"]


def test_the_list_is_one_of_checksums(tmp_path):
    run(tmp_path, report="é", bench__new="c")
    wanted = [
        f"{hashlib.sha256(data).hexdigest()}  {name}" for name, data in [("bench/new", b"c"), ("report", b"\xc3\xa9")]
    ]
    assert (tmp_path / MANIFEST).read_text().splitlines() == wanted


def test_the_list_is_the_same_for_the_same_files(tmp_path):
    run(tmp_path, report="a", bench__new="c")
    first = (tmp_path / MANIFEST).read_bytes()
    run(tmp_path, bench__new="c", report="a")
    assert (tmp_path / MANIFEST).read_bytes() == first
