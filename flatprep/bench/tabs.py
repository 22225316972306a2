"""Holding tabs of a part: whether it gets some, where they go, and what is done about them at the bench."""

from flatprep.bench.part import BenchPart
from flatprep.job.values import Tabs
from flatprep.measure.bends import bend_lines
from flatprep.model.tab import Tab
from flatprep.practice.asked import all_work
from flatprep.practice.tabs import Keep, clear_mm, free_limit_mm, tabs_on
from flatprep.practice.targets import targets_of

FITS = ("ream", "bore", "press")


def lies_free(bench: BenchPart) -> bool:
    """Tell whether a part is large enough to stay where it is once it is cut loose; so is one of unknown limits."""
    least = free_limit_mm(bench.process.limit("part", bench.family, bench.thickness_mm))
    return least is None or max(bench.part.size_mm) >= least - 1e-6


def wants_tabs(bench: BenchPart) -> bool:
    """Tell whether the job asks for tabs on a part."""
    return bench.tabs is Tabs.ALL or (bench.tabs is Tabs.SMALL and not lies_free(bench))


def tabs_of(bench: BenchPart) -> tuple[Tab, ...]:
    """Return the tabs of a part: none where none are asked for, or where its outline has no place for one."""
    if not wants_tabs(bench):
        return ()
    return tabs_on(bench.part, bench.process.tabs, bench.thickness_mm, kerf_mm(bench), _keep(bench))


def kerf_mm(bench: BenchPart) -> float:
    """Return the kerf in the part's material and thickness."""
    return bench.process.kerf_at(bench.family, bench.thickness_mm)


def dressing(bench: BenchPart) -> str:
    """Return what is to be done about the tabs, in words; empty where there are none."""
    tabs = tabs_of(bench)
    if not tabs:
        return ""
    what = f"the {len(tabs)} tabs" if len(tabs) > 1 else "the tab"
    return f"break out {what} of {tabs[0].width_mm:.2g} mm and dress the stubs flush"


def _keep(bench: BenchPart) -> Keep:
    lines = tuple((line.start, line.end) for line in bend_lines(bench.part, bench.bends))
    work = all_work(bench.holes, bench.work, bench.texts, bench.units)
    fits = (t for one in work if one.kind in FITS for t in targets_of(bench.holes, one))
    rims = tuple((*t.at, (t.drawn_mm or 0.0) / 2.0) for t in fits)
    return Keep(lines, rims, clear_mm(bench.thickness_mm))
