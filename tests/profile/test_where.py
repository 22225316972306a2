"""Own folders of profiles, and those that come with flatprep."""

from pathlib import Path

import pytest

from flatprep.base.errors import ProfileError
from flatprep.profile.process_load import load_process
from flatprep.profile.where import KINDS, SHIPPED, candidate, ids, places


def test_every_kind_ships_something():
    assert all(ids(kind) for kind in KINDS)


def test_own_folders_come_first_with_and_without_a_subfolder(tmp_path):
    assert places("materials", (tmp_path,)) == (tmp_path / "materials", tmp_path, SHIPPED / "materials")


def test_ids_of_own_folders_are_among_the_known(tmp_path):
    (tmp_path / "processes").mkdir()
    (tmp_path / "processes" / "shed.toml").touch()
    assert "shed" in ids("processes", (tmp_path,))
    assert "shed" not in ids("processes")


@pytest.mark.parametrize("name", ["", ".hidden", "../processes/router", "a/b", "/etc/passwd"])
def test_names_are_no_paths(name):
    assert candidate("processes", name) is None


def test_a_folder_that_is_not_there():
    with pytest.raises(ProfileError, match="no such folder of profiles"):
        load_process("router", (Path("no/such/folder"),))
