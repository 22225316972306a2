"""What a job, or the command line, says about inside corners."""

from enum import StrEnum

Point = tuple[float, float]


class ReliefKind(StrEnum):
    """Ways of opening an inside corner for a square mate."""

    DOGBONE = "dogbone"
    T_BONE = "t-bone"


class Corners(StrEnum):
    """Which inside corners matter, where they are not named one by one."""

    ALL = "all"
    SQUARE = "square"
    NONE = "none"


WhichCorners = Corners | tuple[Point, ...]
"""All, the square ones, none, or those at these places (drawing, mm)."""
