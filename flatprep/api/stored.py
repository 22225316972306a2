"""A layout read back from its layout.json."""

import json
from pathlib import Path
from typing import Any

import numpy as np

from flatprep.base.errors import UsageError
from flatprep.model.layout import Layout, Placement, SheetLayout, Unplaced

SCHEMA = "flatprep-layout/1"


def stored_layout(path: Path) -> Layout:
    """Read a layout.json.

    Raises
    ------
    UsageError
        When it is missing, no JSON, or not of this schema.
    """
    try:
        data: Any = json.loads(path.read_text())
    except OSError as err:
        raise UsageError(f"{path}: {err.strerror or err}", "give the layout.json that nest has written") from err
    except ValueError as err:
        raise UsageError(f"{path}: no JSON ({err})", "give the layout.json that nest has written") from err
    if not isinstance(data, dict) or data.get("schema") != SCHEMA:
        raise UsageError(f"{path}: not a layout of schema {SCHEMA}", "give the layout.json that nest has written")
    try:
        return Layout(
            float(data["spacing_mm"]),
            float(data["margin_mm"]),
            tuple(_sheet(s) for s in data["sheets"]),
            tuple(Unplaced(str(u["part"]), int(u["count"]), str(u["why"])) for u in data["unplaced"]),
        )
    except (KeyError, TypeError, ValueError, IndexError) as err:
        raise UsageError(
            f"{path}: {type(err).__name__.removesuffix('Error').lower()} error at {err}", "nest anew"
        ) from err


def _sheet(data: Any) -> SheetLayout:
    return SheetLayout(
        stock=str(data["stock"]),
        material=str(data["material"]),
        thickness_mm=float(data["thickness_mm"]),
        outline=np.array(data["outline"], dtype=np.float64).reshape(-1, 2),
        holes=tuple(np.array(h, dtype=np.float64).reshape(-1, 2) for h in data["holes"]),
        used_length_mm=float(data["used_length_mm"]),
        utilisation=float(data["utilisation"]),
        placements=tuple(
            Placement(
                str(p["part"]),
                int(p["copy"]),
                float(p["turn_deg"]),
                bool(p["mirrored"]),
                float(p["dx"]),
                float(p["dy"]),
            )
            for p in data["placements"]
        ),
    )
