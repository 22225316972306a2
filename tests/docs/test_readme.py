"""The README's examples do what they show."""

import os
import re
import shlex
import shutil
import subprocess
import sys
import tomllib
from pathlib import Path

import pytest
from click import Context

from flatprep.base.keys import keys_of
from flatprep.cli.main import Root
from flatprep.job import load, parts, rack, stocks, works
from flatprep.profile import material_load, process_load
from flatprep.profile.process import FEATURES
from tests.docs import reference

ROOT = Path(__file__).parents[2]
README = (ROOT / "README.md").read_text(encoding="utf-8")


def sessions() -> list[tuple[str, str]]:
    """Command and expected output of each ``$`` line in the console blocks."""
    out = []
    for block in re.findall(r"```console\n(.*?)```", README, re.DOTALL):
        for piece in re.split(r"^\$ ", block, flags=re.MULTILINE)[1:]:
            command, _, output = piece.partition("\n")
            out.append((command, output))
    return out


def matches(expected: str, got: str) -> bool:
    """Whether the output is as shown; three dots stand for anything, no-break spaces for spaces."""
    got = got.replace("\u00a0", " ")
    pieces = [re.escape(line) for line in expected.rstrip("\n").split("\n")]
    pattern = "\n".join(pieces).replace(re.escape("..."), r"[^\0]*?")
    return re.fullmatch(pattern, got.rstrip("\n")) is not None


def test_three_dots_stand_for_lines_and_nothing_else_does():
    assert matches("a\n...\nd\n", "a\nb\nc\nd\n")
    assert not matches("a\n...\nd\n", "a\nb\n")
    assert not matches("a (1)\n", "a 1\n")


@pytest.fixture
def folder(tmp_path):
    """A folder with the sample job, so that what an example writes does not stay."""
    shutil.copytree(ROOT / "sample_parts", tmp_path / "sample_parts")
    return tmp_path


def run(words: list[str], folder: Path) -> subprocess.CompletedProcess[str]:
    environment = {**os.environ, "PYTHONUTF8": "1", "NO_COLOR": "1"}
    return subprocess.run(
        [sys.executable, "-m", *words], cwd=folder, env=environment, capture_output=True, encoding="utf-8", timeout=120
    )


@pytest.mark.parametrize(("command", "output"), sessions(), ids=[command for command, _ in sessions()])
def test_an_example_prints_what_it_shows(command, output, folder):
    words = shlex.split(command)
    assert words[0] == "flatprep"
    done = run(words, folder)
    assert done.returncode in (0, 1), done.stderr
    assert matches(output, done.stdout), done.stdout


def test_the_python_example_runs(folder):
    (example,) = re.findall(r"```python\n(.*?)```\n\n```text\n(.*?)```", README, re.DOTALL)
    code, output = example
    (folder / "example.py").write_text(code, encoding="utf-8")
    done = subprocess.run(
        [sys.executable, "example.py"], cwd=folder, capture_output=True, encoding="utf-8", timeout=120
    )
    assert done.returncode == 0, done.stderr
    assert matches(output, done.stdout), done.stdout


def test_every_command_has_an_example():
    for name in Root().list_commands(Context(Root())):
        assert f"flatprep {name}" in README, name


def test_the_tables_of_keys_are_those_of_the_code():
    assert sorted(reference.named(README)) == sorted(reference.TABLES)
    assert reference.made_anew(README) == README, "make them anew: python -m tests.docs.reference"


@pytest.mark.parametrize("rows", reference.TABLES.values(), ids=reference.TABLES)
def test_every_key_is_explained_once(rows):
    keys = keys_of(rows)
    assert len(set(keys)) == len(keys)
    assert [row.keys for row in rows if not row.meaning and not row.default] == []


def test_every_reader_takes_its_keys_from_a_table():
    """A list of keys in a reader that no table has would be read and not explained."""
    explained = {keys_of(rows) for rows in reference.TABLES.values()}
    readers = (load, parts, rack, stocks, works, process_load, material_load)
    taken = {
        f"{reader.__name__}.{name}": value for reader in readers for name, value in vars(reader).items()
        if name.endswith("KEYS") and not name.startswith("_")
    }  # fmt: skip
    inner = {"flatprep.profile.process_load.LIMIT_KEYS", "flatprep.profile.process_load.TAB_KEYS"}
    assert inner <= set(taken)
    assert [name for name, keys in taken.items() if name not in inner and keys not in explained] == []


@pytest.mark.parametrize("keys", [FEATURES, process_load.TAB_KEYS])
def test_the_inner_keys_of_a_process_are_explained(keys):
    section = README.partition("## Profiles")[2].partition("\n## ")[0]
    assert [key for key in keys if f"`{key}`" not in section] == []


def test_every_toml_example_is_toml():
    blocks = re.findall(r"```toml\n(.*?)```", README, re.DOTALL)
    assert blocks
    for block in blocks:
        tomllib.loads(block)


def test_every_link_leads_somewhere():
    for target in re.findall(r"\]\((?!https?:|#)([^)]+)\)", README):
        assert (ROOT / target).exists(), target
