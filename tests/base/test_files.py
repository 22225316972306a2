"""Files are whole or absent; one run a folder; names are never paths."""

import os
import subprocess
import sys

import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.base.errors import OutputError
from flatprep.base.files import claimed, make_folder, write_whole
from flatprep.base.safe_names import safe_stem


def test_file_is_replaced_whole(tmp_path):
    path = tmp_path / "a.txt"
    write_whole(path, "one")
    write_whole(path, b"two")
    assert path.read_text() == "two"
    assert list(tmp_path.iterdir()) == [path]


def test_failure_leaves_the_older_file_and_nothing_else(tmp_path, monkeypatch):
    path = tmp_path / "a.txt"
    write_whole(path, "old")

    def full(_handle):
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    with pytest.raises(OutputError, match="No space left"):
        write_whole(path, "new")
    assert path.read_text() == "old"
    assert list(tmp_path.iterdir()) == [path]


def test_interruption_while_writing_leaves_the_older_file_and_nothing_else(tmp_path, monkeypatch):
    path = tmp_path / "a.txt"
    write_whole(path, "old")

    def interrupted(_handle):
        raise KeyboardInterrupt

    monkeypatch.setattr(os, "fsync", interrupted)
    with pytest.raises(KeyboardInterrupt):
        write_whole(path, "new")
    assert path.read_text() == "old"
    assert list(tmp_path.iterdir()) == [path]


def test_file_is_on_the_disk_before_it_takes_the_name(tmp_path, monkeypatch):
    done = []
    monkeypatch.setattr(os, "fsync", lambda handle: done.append("fsync"))
    replace = os.replace
    monkeypatch.setattr(os, "replace", lambda a, b: (done.append("rename"), replace(a, b)))
    write_whole(tmp_path / "a.txt", "x")
    assert done == ["fsync", "rename"]


def test_what_a_killed_run_left_is_cleared_away(tmp_path):
    code = (
        "import os, sys, pathlib\nfrom flatprep.base.files import write_whole\n"
        "os.fsync = lambda handle: os._exit(9)\nwrite_whole(pathlib.Path(sys.argv[1]), 'x')"
    )
    (tmp_path / "bench").mkdir()
    subprocess.run([sys.executable, "-c", code, str(tmp_path / "bench" / "a.html")], check=False)
    assert len(list((tmp_path / "bench").iterdir())) == 1
    (tmp_path / ".mine.part").write_text("of somebody else")
    with claimed(tmp_path):
        assert list((tmp_path / "bench").iterdir()) == []
        assert (tmp_path / ".mine.part").exists()


def test_text_that_no_encoding_holds_is_written_all_the_same(tmp_path):
    write_whole(tmp_path / "a.txt", "leaf\udce9")
    assert (tmp_path / "a.txt").read_text() == "leaf?"


def test_mode_follows_the_umask(tmp_path):
    path = tmp_path / "a.txt"
    before = os.umask(0o027)
    try:
        write_whole(path, "x")
    finally:
        os.umask(before)
    assert path.stat().st_mode & 0o777 == 0o640


def test_missing_folder_and_file_in_the_way(tmp_path):
    with pytest.raises(OutputError, match="none"):
        write_whole(tmp_path / "none" / "a.txt", "x")
    (tmp_path / "taken").write_text("x")
    with pytest.raises(OutputError, match="taken"):
        make_folder(tmp_path / "taken")


def test_second_run_is_kept_out_and_a_dead_one_is_not(tmp_path):
    code = (
        "import sys, pathlib\nfrom flatprep.base.files import claimed\n"
        "with claimed(pathlib.Path(sys.argv[1])):\n    print('in', flush=True)\n    sys.stdin.read()"
    )
    words = [sys.executable, "-c", code, str(tmp_path / "out")]
    with subprocess.Popen(words, stdin=subprocess.PIPE, stdout=subprocess.PIPE, text=True) as other:
        assert other.stdout is not None
        assert other.stdout.readline() == "in\n"
        with pytest.raises(OutputError, match="another run"), claimed(tmp_path / "out"):
            pass
        other.kill()
        other.wait()
    with claimed(tmp_path / "out"):
        pass


@pytest.mark.parametrize("name", ["leaf", "leaf#2", "side_plate-v1.2"])
def test_plain_names_stay(name):
    assert safe_stem(name) == name


@pytest.mark.parametrize(
    "name",
    [
        "",
        ".",
        "..",
        "../../etc/passwd",
        "/abs",
        "C:\\x",
        "con",
        "NUL.txt",
        "a\x00b",
        "x" * 300,
        "🦀",
        "שלום",
        "a\u202eb",
        " ",
        "-",
    ],
)
def test_odd_names_become_harmless_and_stay_apart(name):
    stem = safe_stem(name)
    assert stem.isascii()
    assert len(stem) <= 100
    assert not set(stem) & set("/\\:\0 ")
    assert not stem.startswith((".", "-"))
    assert stem.split(".")[0].lower() not in {"con", "nul", "aux", "prn"}
    assert stem != safe_stem(name + "x")


@given(st.text(max_size=40))
def test_stem_is_a_name_in_its_folder(tmp_path_factory, name):
    folder = tmp_path_factory.getbasetemp()
    path = (folder / f"{safe_stem(name)}.dxf").resolve()
    assert path.parent == folder.resolve()
