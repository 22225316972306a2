"""``flatprep repair``."""

import json
from dataclasses import replace
from pathlib import Path

import click

from flatprep.api.mates import relief_ask, slot_ask
from flatprep.api.repair import repair_file
from flatprep.base.errors import ExitStatus, UsageError
from flatprep.base.tolerances import DEFAULT
from flatprep.base.units import parse_length_mm
from flatprep.cli.options import output_format, said_about_parts
from flatprep.cli.talk import say
from flatprep.job.context import JobOptions
from flatprep.job.corners import Corners, ReliefKind
from flatprep.profile.process_load import load_process
from flatprep.repair.values import RepairOptions, RoundLimits
from flatprep.report.repair_json import repair_document
from flatprep.report.repair_text import repair_text

CLEARANCE = "0.1mm"


@click.command("repair")
@click.argument("file", type=click.Path(path_type=Path))
@click.option("--out", required=True, type=click.Path(path_type=Path), metavar="FILE", help="the clean drawing")
@click.option(
    "--gap",
    metavar="LENGTH",
    default="0.1mm",
    show_default=True,
    help="outlines open by no more than this are closed by a straight line",
)
@click.option(
    "--deviation",
    metavar="LENGTH",
    default="0.1mm",
    show_default=True,
    help="chords become an arc where it stays this near to them; 0 keeps all chords",
)
@click.option(
    "--relief",
    type=click.Choice([str(kind) for kind in ReliefKind]),
    help="open inside corners that the cutter of --process does not reach, for square mates",
)
@click.option(
    "--corners",
    type=click.Choice([str(Corners.SQUARE), str(Corners.ALL)]),
    help="which inside corners --relief opens; default: the square ones",
)
@click.option(
    "--measured",
    metavar="LENGTH",
    help="what the calliper says of the sheet: slots drawn for --thickness are made to fit it",
)
@click.option(
    "--clearance", metavar="LENGTH", help=f"those slots are so much wider than the sheet; default: {CLEARANCE}"
)
@click.option("--every", is_flag=True, help="tell every change in a line of its own")
@said_about_parts
@output_format
@click.pass_context
def command(
    ctx: click.Context,
    file: Path,
    out: Path,
    gap: str,
    deviation: str,
    relief: str | None,
    corners: str | None,
    measured: str | None,
    clearance: str | None,
    every: bool,
    said: JobOptions,
    form: str,
) -> None:
    """Write a clean drawing: joined, without doubles, arcs for chords, flat, in mm, on layers CUT, MARK and BEND.

    Ends with 1 when something is left that repair will not guess.
    """
    tol = DEFAULT
    if said.process:
        tol = replace(tol, join_mm=load_process(said.process, said.profile_folders).join_gap_mm)
    if corners and not relief:
        raise UsageError(f"--corners {corners}: nothing is opened without --relief", "add --relief dogbone or t-bone")
    if clearance and not measured:
        raise UsageError(f"--clearance {clearance}: no slot is resized without --measured", "add --measured 2.9mm")
    options = RepairOptions(
        _length("--gap", gap), _rounding(_length("--deviation", deviation)), said.units, said.layers, tol,
        relief_ask(ReliefKind(relief), Corners(corners or Corners.SQUARE), said) if relief else None,
        slot_ask(measured, _length("--clearance", clearance or CLEARANCE), said) if measured else None,
    )  # fmt: skip
    done = repair_file(file, out, options)
    if form == "json":
        click.echo(json.dumps(repair_document(done, str(out)), indent=1))
    else:
        say(repair_text(done, str(out), every=every))
    ctx.exit(ExitStatus.FINDINGS if done.left else ExitStatus.CLEAN)


def _length(option: str, text: str) -> float:
    value = parse_length_mm(text)
    if value < 0.0:
        raise UsageError(f"{option} {text}: is below 0", "give a length such as 0.1mm")
    return value


def _rounding(deviation_mm: float) -> RoundLimits:
    plain = RoundLimits()
    if deviation_mm == 0.0:
        return RoundLimits(deviation_mm=0.0, polygon_mm=0.0)
    return RoundLimits(deviation_mm=deviation_mm, polygon_mm=max(plain.polygon_mm, deviation_mm))
