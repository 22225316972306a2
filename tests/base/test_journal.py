"""Changes of several files: all or none, however the process ends."""

import json
import os
import subprocess
import sys

import pytest

from flatprep.base import journal
from flatprep.base.errors import OutputError
from flatprep.base.journal import NAME, Changes, change_together, finish, is_unfinished

CHANGES = Changes({"count.txt": "1", "new/a.txt": "A"}, (("old.txt", "used/old.txt"),))
AFTER = {"count.txt": "1", "new/a.txt": "A", "used/old.txt": "old"}
BEFORE = {"count.txt": "2", "old.txt": "old"}


def state(folder):
    return {p.relative_to(folder).as_posix(): p.read_text() for p in folder.rglob("*") if p.is_file()}


@pytest.fixture
def folder(tmp_path):
    for name, text in BEFORE.items():
        (tmp_path / name).write_text(text)
    return tmp_path


def test_all_is_done_and_nothing_is_left_behind(folder):
    change_together(folder, CHANGES)
    assert state(folder) == AFTER
    assert not is_unfinished(folder)
    assert finish(folder) is False


@pytest.mark.parametrize("moment", range(12))
def test_killed_at_any_moment_it_is_all_or_nothing(folder, moment, monkeypatch):
    """Every call that changes the disk dies in its turn, until there are no more of them."""
    calls = 0

    def dying(work):
        def maybe(*words, **more):
            nonlocal calls
            calls += 1
            if calls == moment + 1:
                raise KeyboardInterrupt
            return work(*words, **more)

        return maybe

    with monkeypatch.context() as patch:
        patch.setattr(os, "replace", dying(os.replace))
        patch.setattr(journal, "write_whole", dying(journal.write_whole))
        patch.setattr(journal.Path, "unlink", dying(journal.Path.unlink))
        try:
            change_together(folder, CHANGES)
        except KeyboardInterrupt:
            pass
        else:
            assert calls <= moment
    begun = is_unfinished(folder)
    finish(folder)
    left = {name: text for name, text in state(folder).items() if not name.endswith(".part")}
    assert left == (AFTER if begun or moment >= 2 else BEFORE)


def test_killed_for_good_the_next_one_finishes(folder):
    """A process that dies by SIGKILL once the changes are written down."""
    code = (
        "import os, signal\nfrom pathlib import Path\nfrom flatprep.base import journal\n"
        "journal.finish = lambda folder: os.kill(os.getpid(), signal.SIGKILL)\n"
        "journal.change_together(Path('.'), journal.Changes({'count.txt': '1', 'new/a.txt': 'A'},"
        " (('old.txt', 'used/old.txt'),)))\n"
    )
    assert subprocess.run([sys.executable, "-c", code], cwd=folder).returncode == -9
    assert is_unfinished(folder)
    assert finish(folder) is True
    assert state(folder) == AFTER


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("{", "is damaged"),
        ('{"write": {}}', "is damaged"),
        (json.dumps({"write": {"../x": ""}, "move": []}), "lies outside"),
        (json.dumps({"write": {}, "move": [["old.txt", "/tmp/x"]]}), "lies outside"),
    ],
)
def test_what_is_none_of_ours_is_refused(folder, text, words):
    (folder / NAME).write_text(text)
    with pytest.raises(OutputError, match=words):
        finish(folder)
    assert (folder / "old.txt").exists()


def test_a_folder_that_cannot_be_written_stays_as_it_was(folder):
    (folder / "new").write_text("a file in the way")
    before = state(folder)
    with pytest.raises(OutputError, match="cannot be written into"):
        change_together(folder, CHANGES)
    assert state(folder) == before
