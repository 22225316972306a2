"""A cutting process: kerf, tool, and the limits of what it can cut."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from enum import StrEnum


class ProcessKind(StrEnum):
    """The kinds of cutting process that a profile may describe."""

    LASER = "laser"
    ROUTER = "router"


@dataclass(frozen=True, slots=True)
class Limit:
    """A least size in force, mm: below `error` a finding is an error, below `warn` a warning.

    `warn` is None where the profile knows no warning level. `source` says where the figure is from.
    """

    error: float
    warn: float | None
    source: str


@dataclass(frozen=True, slots=True)
class Process:
    """A process profile.

    Attributes
    ----------
    id : str
        What `--process` names it by: file stem.
    kerf_mm, tool_diameter_mm : float
        Tool diameter is 0 for lasers.
    spacing_mm, margin_mm : float
        Defaults for a nest.
    join_gap_mm : float
        Ends this near are one point, in silence.
    windows : bool
        Whether parts may be cut out of the windows of others by default (lasers: yes; routers: no, vacuum).
    """

    id: str
    name: str
    kind: ProcessKind
    kerf_mm: float
    tool_diameter_mm: float = 0.0
    spacing_mm: float = 3.0
    margin_mm: float = 8.0
    join_gap_mm: float = 0.05
    bed_mm: tuple[float, float] | None = None
    windows: bool = True
    source: str = ""
    extra: Mapping[str, object] = field(default_factory=dict)
