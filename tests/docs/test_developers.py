"""DEVELOPERS.md names what is there."""

import re
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
TEXT = (ROOT / "DEVELOPERS.md").read_text(encoding="utf-8")
SOURCES = "\n".join(
    path.read_text(encoding="utf-8")
    for folder in ("flatprep", "tests")
    for path in sorted((ROOT / folder).rglob("*.py"))
)


def test_every_package_is_in_the_house():
    house = TEXT.partition("## The house")[2].partition("\n## ")[0]
    packages = {path.parent.name for path in (ROOT / "flatprep").glob("*/__init__.py")}
    assert [name for name in sorted(packages) if f"\n  {name}/" not in house] == []


def test_every_variable_is_explained_and_read():
    named = set(re.findall(r"`(FLATPREP_[A-Z_]+)(?:=1)?` \|", TEXT))
    read = set(re.findall(r"\"(FLATPREP_[A-Z_]+)\"", SOURCES))
    assert named == read


@pytest.mark.parametrize("module", sorted(set(re.findall(r"`python -m (tests\.[\w.]+)", TEXT))))
def test_every_campaign_is_there(module):
    assert (ROOT / Path(*module.split("."))).with_suffix(".py").is_file()


def test_every_campaign_is_named():
    long = [path.stem for path in (ROOT / "tests" / "long").glob("*.py") if path.stem != "__init__"]
    assert [name for name in sorted(long) if name not in TEXT] == []


@pytest.mark.parametrize("path", sorted(set(re.findall(r"`(flatprep/[\w./]+|profiles/[\w./]+|tests/[\w./]+)`", TEXT))))
def test_every_path_leads_somewhere(path):
    assert (ROOT / path).exists()
