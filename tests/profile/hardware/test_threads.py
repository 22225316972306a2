"""Threads: every row against its reference, names in any usual form, drills inside the limits."""

import re

import pytest

from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.profile.hardware.threads import all_threads, find_thread
from tests.profile.hardware.rows import named, rows

INCH = 25.4
TD1_6H = {
    0.35: 0.100, 0.4: 0.112, 0.45: 0.125, 0.5: 0.140, 0.6: 0.160, 0.7: 0.180, 0.75: 0.190, 1: 0.236, 0.8: 0.200,
    1.25: 0.265,
    1.5: 0.300, 1.75: 0.335, 2: 0.375, 2.5: 0.450, 3: 0.500, 3.5: 0.560,
}  # fmt: skip
"""ISO 965-1, minor diameter tolerance 6H by pitch, mm (read up to 2.5; 3 and 3.5 from memory)."""


@pytest.mark.parametrize("row", rows("threads_metric"), ids=named)
def test_every_metric_thread_is_as_published(row):
    found = find_thread(row["thread"])
    assert (found.pitch_mm, found.drill_mm) == (row["pitch"], row["drill"])
    if "minor_min" in row:
        assert (found.minor_min_mm, found.minor_max_mm) == (row["minor_min"], row["minor_max"])


@pytest.mark.parametrize("thread", [t for t in all_threads() if not t.is_inch], ids=lambda t: t.name)
def test_metric_limits_follow_the_standards_formula(thread):
    """ISO 965-1: least minor diameter d - 1.082532 P, tolerance by pitch; both are printed to 0.001 mm."""
    assert thread.minor_min_mm == pytest.approx(thread.major_mm - 1.082532 * thread.pitch_mm, abs=6e-4)
    assert thread.minor_max_mm - thread.minor_min_mm == pytest.approx(TD1_6H[thread.pitch_mm], abs=6e-4)
    assert thread.name.startswith(f"M{thread.major_mm:g}")


@pytest.mark.parametrize("row", rows("threads_unified"), ids=named)
def test_every_unified_thread_is_as_published(row):
    found = find_thread(row["thread"])
    assert pytest.approx(INCH / row["pitch_in_tpi"], rel=1e-12) == found.pitch_mm
    assert found.drill_mm == pytest.approx(row["drill_in"] * INCH or row["metric_drill"], rel=1e-12)
    assert found.metric_drill_mm == row["metric_drill"]
    limits = (found.minor_min_mm / INCH, found.minor_max_mm / INCH)
    assert limits == pytest.approx((row["minor_min_in"], row["minor_max_in"]), rel=1e-12)


@pytest.mark.parametrize("thread", [t for t in all_threads() if t.is_inch], ids=lambda t: t.name)
def test_unified_least_minor_diameter_follows_the_formula(thread):
    """ASME B1.1: D - 1.082532 p, printed to 0.001 in (0.0001 in for small sizes)."""
    size = thread.screw
    major = 0.060 + 0.013 * int(size[1:]) if size[0] == "#" else inches_of(size)
    assert thread.major_mm == pytest.approx(major * INCH, abs=1e-9)
    assert thread.minor_min_mm / INCH == pytest.approx(major - 1.082532 * thread.pitch_mm / INCH, abs=6e-4)


def inches_of(text: str) -> float:
    upper, _, lower = text.partition("/")
    return float(upper) / float(lower or 1)


@pytest.mark.parametrize("thread", all_threads(), ids=lambda t: t.name)
def test_drills_lie_inside_the_limits(thread):
    assert thread.minor_min_mm <= thread.drill_mm <= thread.minor_max_mm
    assert thread.minor_min_mm - 0.005 <= thread.metric_drill_mm <= thread.minor_max_mm + 0.005
    assert thread.admits(thread.drill_mm)
    assert not thread.admits(thread.minor_max_mm + 0.01)
    assert not thread.admits(thread.minor_min_mm - 0.01)


@pytest.mark.parametrize("thread", all_threads(), ids=lambda t: t.name)
def test_a_thread_is_found_by_its_own_name_and_names_its_source(thread):
    assert find_thread(thread.name) is thread
    assert thread.source.count(";") >= 1


@pytest.mark.parametrize(
    ("text", "name"),
    [
        ("M6", "M6"), ("m6", "M6"), ("M 6", "M6"), ("M6x1", "M6"), ("M8x1", "M8x1"), ("M8×1", "M8x1"),
        ("M8 x 1,0", "M8x1"), ("M8X1", "M8x1"), ("M6x1-6H", "M6"), ("M6 - 6H", "M6"), ("M10x1.25", "M10x1.25"),
        ("M2.5", "M2.5"), ("M2,5", "M2.5"), ("1/4-20", "1/4-20 UNC"), ("1/4-20 UNC", "1/4-20 UNC"),
        ("1/4-20UNC-2B", "1/4-20 UNC"), ('1/4"-20', "1/4-20 UNC"), ("1/4 in - 20 UNC", "1/4-20 UNC"),
        ("0.25-20", "1/4-20 UNC"), ("1/4 UNF", "1/4-28 UNF"), ("#10-24", "#10-24 UNC"), ("10-24", "#10-24 UNC"),
        ("No. 10-32", "#10-32 UNF"), ("10-32 UNF-2B", "#10-32 UNF"), ("#10 UNC", "#10-24 UNC"), ("1-8", "1-8 UNC"),
        ("3/8-16 UNC-2B LH", "3/8-16 UNC"),
    ],
)  # fmt: skip
def test_usual_ways_of_writing(text, name):
    assert find_thread(text).name == name


@pytest.mark.parametrize(
    ("text", "near"),
    [
        ("M9", ("M8", "M10")), ("M8x1.2", ("M8x1",)), ("1/4", ("1/4-20 UNC", "1/4-28 UNF")),
        ("#10-28", ("#10-24", "#10-32")),
        ("1/4-24", ("1/4-20", "1/4-28")), ("bolt", ("known",)), ("", ("known",)), ("M", ("M",)), ("1/0-20", ("known",)),
    ],
)  # fmt: skip
def test_unknown_threads_get_the_nearest(text, near):
    with pytest.raises(UnknownHardwareError, match=re.escape(f'thread "{text}"')) as caught:
        find_thread(text)
    assert all(name in caught.value.remedy for name in near)


def test_a_new_series_is_one_new_file(tmp_path):
    (tmp_path / "hardware").mkdir()
    (tmp_path / "hardware" / "threads_pipe.toml").write_text(
        'source.title = "own"\nrow = [{ thread = "M77x4", series = "fine", d = 77.0, pitch = 4.0, drill = 73.0, '
        "minor_min = 72.67, minor_max = 73.27 }]\n"
    )
    assert find_thread("M77x4", (tmp_path,)).drill_mm == 73.0
    assert find_thread("M6", (tmp_path,)).drill_mm == 5.0
