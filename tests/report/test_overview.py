"""Verdict, figures, tools, charts."""

import re
from dataclasses import replace

import pytest

from flatprep.model.finding import Finding, Severity
from flatprep.model.work import JointCheck, Outcome
from flatprep.report.bundle import Bundle, PartCard, SearchPoint
from flatprep.report.charts import search_plot, share_bar
from flatprep.report.overview import figures, verdict


def card_with(*severities: Severity) -> PartCard:
    return PartCard("leaf", None, findings=tuple(Finding("small-hole", s, "small") for s in severities))


@pytest.mark.parametrize(
    ("bundle", "level", "word"),
    [
        (Bundle("a", cards=(card_with(),)), "go", "Nothing found"),
        (Bundle("a", cards=(card_with(Severity.NOTE),)), "go", "Nothing found"),
        (Bundle("a", cards=(card_with(Severity.WARNING, Severity.NOTE),)), "look", "Look first"),
        (Bundle("a", cards=(card_with(Severity.ERROR, Severity.WARNING),)), "stop", "Not ready"),
        (Bundle("a", cards=(card_with(),), unreadable=(("x.dxf", "broken"),)), "stop", "Not ready"),
    ],
)
def test_the_verdict_follows_the_worst(bundle, level, word):
    said = verdict(bundle)
    assert said.level == level
    assert said.headline.startswith(word)


def test_a_piece_without_a_place_stops_the_job(bundle):
    calm = replace(bundle, cards=(card_with(),), unreadable=())
    assert verdict(calm).detail == "1 piece without a place."


def test_a_joint_that_does_not_close_stops_the_job(bundle):
    joint = replace(bundle.checklist.joints[0], checks=(JointCheck("length", Outcome.BAD, "bolt too short"),))
    calm = Bundle("a", cards=(card_with(),), checklist=replace(bundle.checklist, joints=(joint,)))
    assert verdict(calm).detail == "1 joint that does not close."


def test_mass_is_held_against_its_limit(bundle):
    shown = {f.name: f for f in figures(bundle)}
    assert shown["Mass, one set"].value == "9.50\u00a0kg"
    assert shown["Mass, one set"].detail == "limit 10.0\u00a0kg, 500\u00a0g left"
    heavy = replace(bundle, estimate=replace(bundle.estimate, mass_kg=12.0))
    assert {f.name: f for f in figures(heavy)}["Mass, one set"].detail == "limit 10.0\u00a0kg, 2.00\u00a0kg over"


def test_what_is_not_known_is_said_not_invented(bundle):
    unpriced = replace(bundle, estimate=replace(bundle.estimate, material_cost=None, mass_kg=None))
    shown = {f.name: f.value for f in figures(unpriced)}
    assert shown["Material cost"] == "not known"
    assert shown["Mass, one set"] == "not known"


def test_a_bar_is_as_long_as_its_share():
    svg = share_bar(0.25, "25 %")
    assert 'class="bar-value" x="0" y="0" width="25"' in svg
    assert 'width="100" height="8"/></svg>' in share_bar(1.7, "too much")


def test_the_plot_shows_sheets_and_length_where_they_changed():
    both = search_plot((SearchPoint(0.5, 3, 1000.0), SearchPoint(4.0, 2, 900.0)))
    assert both.count("<svg") == 2
    assert "Sheets: from 3 to 2 in 4\u00a0s" in both
    assert "Used length: from 1000\u00a0mm to 900\u00a0mm in 4\u00a0s" in both
    shorter = (SearchPoint(0.5, 1, 100.0), SearchPoint(4.0, 1, 76.2))
    assert "Sheets" not in search_plot(shorter)
    assert "to 3\u00a0in in 4" in search_plot(shorter, "in")  # 76.2 / 25.4
    assert search_plot((SearchPoint(0.5, 1, 100.0), SearchPoint(4.0, 1, 100.0))) == ""
    assert search_plot(()) == ""


def test_the_curve_of_the_plot_goes_down_the_page_as_the_value_falls():
    svg = search_plot((SearchPoint(1.0, 1, 100.0), SearchPoint(2.0, 1, 50.0)))
    start, end = re.search(r'class="curve" d="M[\d.]+ ([\d.]+)H[\d.]+V([\d.]+)"', svg).groups()
    assert float(end) > float(start)
