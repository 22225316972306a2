"""The rules in force: every rule, limits of the profile that was said, sources with them."""

import json

import pytest
from click.testing import CliRunner

from flatprep.api.rules import rules_in_force
from flatprep.cli.main import root
from flatprep.job.context import JobOptions
from flatprep.rules import ALL

PROFILE = """
name = "our laser"
kind = "laser"
kerf = 0.2
source = "measured by us"

[limits]
hole_min = 1.0
hole_to_thickness = 0.5

[warn]
hole_to_thickness = 1.5
"""


@pytest.fixture
def said(tmp_path):
    file = tmp_path / "ours.toml"
    file.write_text(PROFILE)
    return JobOptions(process=str(file), material="mild-steel", thickness="4mm")


def test_every_rule_is_listed_in_order():
    assert [rule.id for rule in rules_in_force().rules] == [rule.id for rule in ALL]
    assert all(rule.limits == () for rule in rules_in_force().rules)


def test_limits_are_the_profile_s(said):
    (limit,) = next(rule for rule in rules_in_force(said).rules if rule.id == "small-hole").limits
    # larger of 1 mm and half of 4 mm; one and a half times 4 mm
    assert (limit.error_mm, limit.warn_mm, limit.source) == (2.0, 6.0, "measured by us")


def test_text_and_json_say_the_same(said):
    words = ["rules", "--process", said.process, "--material", "mild-steel", "--thickness", "4mm"]
    text = CliRunner().invoke(root, words).stdout.replace("\u00a0", " ")
    assert "limits of ours in mild-steel, 4 mm" in text
    assert "hole: error below 2 mm, warning below 6 mm (measured by us)" in text
    document = json.loads(CliRunner().invoke(root, [*words, "--format", "json"]).stdout)
    assert document["schema"] == "flatprep-rules/1"
    assert len(document["rules"]) == len(ALL)
    hole = next(rule for rule in document["rules"] if rule["id"] == "small-hole")
    assert hole["limits"] == [{"feature": "hole", "error_mm": 2.0, "warn_mm": 6.0, "source": "measured by us"}]


def test_without_a_process_no_limit_is_shown():
    done = CliRunner().invoke(root, ["rules"])
    assert done.exit_code == 0
    assert "limits are not shown" in done.stdout
    assert "error below" not in done.stdout
