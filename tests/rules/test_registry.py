"""Every rule is in the tuple, and says what a person needs."""

import importlib
import pkgutil
import re
from pathlib import Path

import pytest

import flatprep.drawing
import flatprep.rules
from flatprep.model.finding import Finding, Severity
from flatprep.profile.process import Limit
from flatprep.rules.base import Rule, findings, judge
from tests.rules.setting import context

# fmt: off
CONTRACT = {
    "open-contour", "duplicate-line", "self-crossing", "tiny-segment", "unknown-units", "unsupported-entity",
    "text-not-outlined", "off-plane", "empty-drawing", "loose-island", "several-parts", "small-hole", "thin-web",
    "narrow-slot", "inside-corner", "small-part", "too-large", "hole-near-bend", "short-flange", "tight-bend",
    "bend-along-grain", "thickness-out-of-range", "wrong-process", "unsafe-material", "tap-hole-size",
    "thread-engagement", "bore-size", "countersink-too-deep", "unclear-hole",
}
# fmt: on


def modules():
    names = [m.name for m in pkgutil.iter_modules(flatprep.rules.__path__)]
    return [importlib.import_module(f"flatprep.rules.{name}") for name in names]


def test_no_rule_is_missing_from_the_tuple():
    rules = {m.__name__: m.RULE for m in modules() if hasattr(m, "RULE")}
    assert {id(rule) for rule in rules.values()} == {id(rule) for rule in flatprep.rules.ALL}
    assert len(flatprep.rules.ALL) == len(rules)


def test_a_module_is_named_as_its_rule():
    for module in modules():
        if hasattr(module, "RULE"):
            assert module.__name__.rsplit(".", 1)[1].replace("_", "-") == module.RULE.id
            assert module.__doc__.startswith(f"{module.RULE.id}: ")


def test_every_rule_of_the_interface_is_there():
    assert {rule.id for rule in flatprep.rules.ALL} >= CONTRACT


def test_a_rule_answers_for_everything_that_the_reader_notices():
    sources = Path(flatprep.drawing.__path__[0]).glob("*.py")
    noticed = {kind for path in sources for kind in re.findall(r"Fault\(\s*\"([a-z-]+)\"", path.read_text())}
    assert len(noticed) > 5
    assert noticed <= {rule.id for rule in flatprep.rules.ALL}


@pytest.mark.parametrize("rule", flatprep.rules.ALL, ids=lambda r: r.id)
def test_texts_are_sentences(rule):
    for text in (rule.summary, rule.why, rule.remedy):
        assert text[0].isupper()
        assert text.endswith(".")


def test_remedy_is_filled_in_where_a_finding_has_none():
    bare = Finding("knot", Severity.NOTE, "a knot")
    own = Finding("knot", Severity.NOTE, "a knot", remedy="Cut it.")
    rule = Rule("knot", Severity.NOTE, "A knot.", "It holds.", "Untie it.", lambda _: (bare, own))
    assert [f.remedy for f in findings([rule], context())] == ["Untie it.", "Cut it."]


@pytest.mark.parametrize(
    ("measured", "verdict"),
    [
        pytest.param(1.998, (Severity.ERROR, 2.0), id="below-error"),
        pytest.param(1.9991, (Severity.WARNING, 3.0), id="within-slack-of-error"),
        pytest.param(2.0, (Severity.WARNING, 3.0), id="at-error"),
        pytest.param(2.998, (Severity.WARNING, 3.0), id="below-warn"),
        pytest.param(2.9995, None, id="within-slack-of-warn"),
        pytest.param(3.0, None, id="at-warn"),
        pytest.param(9.0, None, id="far"),
    ],
)
def test_judge(measured, verdict):
    assert judge(measured, Limit(2.0, 3.0, "made up"), 0.001) == verdict


def test_without_a_warning_level_only_errors_are_loud():
    assert judge(2.0, Limit(2.0, None, "made up"), 0.001) is None
