"""A fixed sample of the campaign `tests.long.fuzz_verbs`: damaged drawings through the verbs, in this process."""

import json
from pathlib import Path
from random import Random

import pytest
from click.testing import CliRunner

from flatprep.cli.main import root
from tests.damage import damaged, half_written
from tests.long.fuzz_verbs import JOB, PART, SOUND

OURS = sorted((Path(__file__).parents[1] / "drawings").glob("*.dxf"))


@pytest.fixture
def broken(tmp_path):
    rng = Random(7)
    files = [tmp_path / f"m{k}.dxf" for k in range(8)]
    for file in files:
        file.write_bytes(damaged(rng.choice(OURS).read_bytes(), rng))
    assert any(file.read_bytes() not in [ours.read_bytes() for ours in OURS] for file in files)
    return files


def run(*words):
    """With FLATPREP_TRACEBACK set, as in all tests, a failure of ours is raised and seen whole."""
    got = CliRunner().invoke(root, [str(w) for w in words], catch_exceptions=False)
    assert got.exit_code in (0, 1, 2)
    return got


@pytest.mark.parametrize("verb", ["nest", "prepare"])
def test_in_a_job_a_sound_part_still_gets_its_place(broken, tmp_path, verb):
    sound = tmp_path / SOUND.name
    sound.write_bytes(SOUND.read_bytes())
    job = tmp_path / "job.toml"
    job.write_text(JOB + "".join(PART.format(file.stem) for file in (*broken, sound)))
    run(verb, job, "--out", tmp_path / "out", "--steps", "1")
    layout = json.loads((tmp_path / "out" / "layout.json").read_text())
    placed = {p["part"] for sheet in layout["sheets"] for p in sheet["placements"]}
    assert sound.stem in placed
    named = {name.partition("#")[0] for name in placed | {u["part"] for u in layout["unplaced"]}}
    assert named == {file.stem for file in (*broken, sound)}
    assert half_written(tmp_path / "out") == []


def test_lint_answers_each(broken, tmp_path):
    got = run("lint", tmp_path, "--format", "json")
    said = json.loads(got.stdout)
    assert {Path(one["file"]) for one in said["drawings"] + said["unreadable"]} == set(broken)


def test_compare_and_repair(broken, tmp_path):
    out = tmp_path / "out"
    out.mkdir()
    for file in broken[:4]:
        compared = run("compare", SOUND, file, "--svg", out / f"{file.stem}.svg")
        assert (out / f"{file.stem}.svg").exists() == (compared.exit_code != 2)
        mended = run("repair", file, "--out", out / file.name)
        assert (out / file.name).exists() == (mended.exit_code != 2)
    assert half_written(out) == []
