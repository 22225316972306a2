"""A cutting process: kerf, tool, and the limits of what it can cut in which material and thickness."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from enum import StrEnum
from math import ceil, inf

from flatprep.profile.points import Points, between, clamped

FEATURES = ("hole", "web", "slot", "part", "inside_corner", "edge")
"""What a limit may be given for: ``FEATURE_min`` and its kin are the keys of ``[limits]`` and ``[warn]``."""

SCALES = ("min", "to_thickness", "to_tool", "to_kerf")
"""How a least size is given: in mm, or times the thickness, the tool's diameter or the kerf. The largest rules."""


class ProcessKind(StrEnum):
    """The kinds of cutting process that a profile may describe."""

    LASER = "laser"
    ROUTER = "router"
    PLASMA = "plasma"
    WATERJET = "waterjet"


@dataclass(frozen=True, slots=True)
class Limit:
    """A least size in force, mm: below `error` a finding is an error, below `warn` a warning.

    `warn` is None where the profile knows no warning level. `source` says where the figure is from.
    """

    error: float
    warn: float | None
    source: str


@dataclass(frozen=True, slots=True)
class Band:
    """Limits that hold above one thickness and up to another.

    Attributes
    ----------
    errors, warns : mapping of str to float
        Values by key, such as ``hole_to_thickness``.
    sources : mapping of str to str
        Where the figures of a feature are from.
    above_mm, upto_mm : float
        Thickness; the first is not in the band, the second is.
    """

    errors: Mapping[str, float]
    warns: Mapping[str, float]
    sources: Mapping[str, str]
    above_mm: float = 0.0
    upto_mm: float = inf

    def holds(self, thickness_mm: float | None) -> bool:
        """Tell whether the band holds in a thickness; in an unknown one only if it holds in all."""
        if thickness_mm is None:
            return self.above_mm == 0.0 and self.upto_mm == inf
        return self.above_mm < thickness_mm <= self.upto_mm


@dataclass(frozen=True, slots=True)
class Terms:
    """What a profile says of one material family, or of all of them.

    Attributes
    ----------
    bands : tuple of Band
        Later ones go before earlier ones, key by key.
    thickness_mm : (float, float) or None
        Least and most that the process cuts.
    kerf, feed_mm_min, pierce_s : tuple of (thickness mm, value)
        Tables by rising thickness; kerf in mm.
    source : str
    """

    bands: tuple[Band, ...] = ()
    thickness_mm: tuple[float, float] | None = None
    kerf: Points = ()
    feed_mm_min: Points = ()
    pierce_s: Points = ()
    source: str = ""


@dataclass(frozen=True, slots=True)
class TabRule:
    """How parts are held by tabs while they are cut.

    Attributes
    ----------
    count : int
        Tabs of a part at the least.
    width_mm, width_to_thickness : float
        Material left standing: mm, or times the thickness; the larger rules.
    every_mm : float
        One tab for so much of the outline; infinite: `count` is enough for any.
    source : str
    """

    count: int = 2
    width_mm: float = 0.5
    width_to_thickness: float = 0.1
    every_mm: float = inf
    source: str = "common practice"

    def width(self, thickness_mm: float | None) -> float:
        """Return the width of a tab, mm."""
        return max(self.width_mm, self.width_to_thickness * (thickness_mm or 0.0))

    def number(self, outline_mm: float) -> int:
        """Return how many tabs an outline of some length gets."""
        return max(self.count, ceil(outline_mm / self.every_mm - 1e-9))


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
    beam : str
        ``fibre`` or ``co2`` for a laser that says so.
    power, caution : str
        Power class, and what the output should warn of.
    slat_pitch_mm : float or None
        Distance of the slats of the grate that a part may fall through.
    machine_rate : float or None
        Money per hour of cutting, in the job's currency; the user's own figure.
    direct_tap_mm : float or None
        Soft metals up to this thickness are cut to the tap drill and tapped directly; None: as the bench rules say.
    pilot_under_mm : float or None
        By how much a hole is cut under its tap drill where it is drilled out; None: as the bench rules say.
    tabs : TabRule
        Number and width of holding tabs.
    general : Terms
        What holds for every material.
    families : mapping of str to Terms
        What goes before it, by material family.
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
    beam: str = ""
    power: str = ""
    caution: str = ""
    slat_pitch_mm: float | None = None
    machine_rate: float | None = None
    direct_tap_mm: float | None = None
    pilot_under_mm: float | None = None
    tabs: TabRule = TabRule()
    general: Terms = Terms()
    families: Mapping[str, Terms] = field(default_factory=dict)

    @property
    def technology(self) -> str:
        """``fibre-laser``, ``co2-laser``, ``laser`` (which beam is not said), ``router``, ``plasma``, ``waterjet``."""
        return f"{self.beam}-laser" if self.kind is ProcessKind.LASER and self.beam else str(self.kind)

    def terms(self, family: str | None) -> tuple[Terms, ...]:
        """Return what the profile says, the general first, the family's own last."""
        own = self.families.get(family) if family else None
        return (self.general,) if own is None else (self.general, own)

    def limit(self, feature: str, family: str | None, thickness_mm: float | None) -> Limit | None:
        """Return the least size of a feature, or None where the profile (or an unknown thickness) leaves it open.

        Parameters
        ----------
        feature
            One of `FEATURES`: ``hole`` (diameter), ``web``, ``slot`` (least width), ``part`` (larger side of the
            box), ``inside_corner`` (radius), ``edge`` (hole rim to part edge), ...
        family
            The material's family; None for the general limits.
        thickness_mm
            None where it is not known.

        Notes
        -----
        A minimum is the larger of NAME_min (mm) and NAME_to_thickness times the thickness; NAME_to_tool and
        NAME_to_kerf are further terms of the same kind. The family's bands go before the general ones key by key.
        """
        bands = [band for terms in self.terms(family) for band in terms.bands if band.holds(thickness_mm)]
        error = self._least(feature, _merged(feature, [band.errors for band in bands]), family, thickness_mm)
        warn = self._least(feature, _merged(feature, [band.warns for band in bands]), family, thickness_mm)
        if error is None and warn is None:
            return None
        source = next((b.sources[feature] for b in reversed(bands) if feature in b.sources), self.source or self.name)
        low = error or 0.0
        return Limit(low, None if warn is None else max(warn, low), source)

    def _least(
        self, feature: str, given: Mapping[str, float], family: str | None, thickness_mm: float | None
    ) -> float | None:
        if not given or (thickness_mm is None and given.get(f"{feature}_to_thickness")):
            return None
        of_what = (1.0, thickness_mm or 0.0, self.tool_diameter_mm, self.kerf_at(family, thickness_mm))
        return max(given.get(f"{feature}_{scale}", 0.0) * size for scale, size in zip(SCALES, of_what, strict=True))

    def thickness_mm(self, family: str | None) -> tuple[float, float] | None:
        """Return the least and the most thickness that the process cuts, or None where it is not stated."""
        stated = [terms.thickness_mm for terms in self.terms(family) if terms.thickness_mm]
        return stated[-1] if stated else None

    def kerf_at(self, family: str | None, thickness_mm: float | None) -> float:
        """Return the typical kerf in a material and thickness, mm; the profile's plain kerf where it has no table."""
        tables = [terms.kerf for terms in self.terms(family) if terms.kerf]
        return clamped(tables[-1], thickness_mm) if tables and thickness_mm is not None else self.kerf_mm

    def cut_seconds(
        self, family: str | None, thickness_mm: float | None, cut_length_mm: float, pierces: int
    ) -> float | None:
        """Return the time of cutting and piercing, s, without the moves between cuts.

        None where the profile knows no feed for that material and thickness: nothing is extrapolated.
        """
        feeds = [terms.feed_mm_min for terms in self.terms(family) if terms.feed_mm_min]
        times = [terms.pierce_s for terms in self.terms(family) if terms.pierce_s]
        if not feeds or thickness_mm is None:
            return None
        feed = between(feeds[-1], thickness_mm)
        pierce = between(times[-1], thickness_mm) if times else 0.0
        return None if feed is None or pierce is None else 60.0 * cut_length_mm / feed + pierces * pierce


def _merged(feature: str, layers: list[Mapping[str, float]]) -> dict[str, float]:
    keys = [f"{feature}_{scale}" for scale in SCALES]
    return {key: layer[key] for layer in layers for key in keys if key in layer}
