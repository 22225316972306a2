"""Reads the reference tables; a table without a source is no reference."""

import tomllib
from functools import cache
from pathlib import Path
from typing import Any

FOLDER = Path(__file__).parent / "reference"


@cache
def table(name: str) -> dict[str, Any]:
    """The table of that name; it must say where it is from."""
    data = tomllib.loads((FOLDER / f"{name}.toml").read_text())
    assert data["source"]["title"], f"{name}.toml names no source"
    assert data["source"]["how"], f"{name}.toml does not say how its figures were got"
    return data
