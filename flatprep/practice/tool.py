"""What the roundness of a tool means for inside corners, in a material and thickness."""

from flatprep.profile.process import Process

_THINNEST_MM = 1e-3
"""In an unknown thickness limits are those of the thinnest sheet."""


def tool_radius_mm(process: Process, family: str | None, thickness_mm: float | None) -> float:
    """Least radius of an inside corner, mm: half the tool's diameter or the profile's own; 0 where there is none."""
    limit = process.limit("inside_corner", family, thickness_mm)
    return max(process.tool_diameter_mm / 2.0, limit.error if limit else 0.0)


def least_web_mm(process: Process, family: str | None, thickness_mm: float | None) -> float:
    """Material that must be left between two cuts, or between a cut and the edge, mm; 0 where nothing is known."""
    thickness = _THINNEST_MM if thickness_mm is None else thickness_mm
    limits = [process.limit(feature, family, thickness) for feature in ("web", "edge")]
    return max((limit.error for limit in limits if limit is not None), default=0.0)
