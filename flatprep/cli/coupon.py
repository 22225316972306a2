"""``flatprep coupon``."""

import json
from pathlib import Path

import click

from flatprep.api.coupon import coupons_of, write_coupons
from flatprep.cli.jobs import job_argument, read_drawings
from flatprep.cli.options import output_format, said_about_parts
from flatprep.cli.progress import progress_line
from flatprep.cli.talk import say
from flatprep.job.context import JobOptions
from flatprep.job.load import load_job
from flatprep.report.coupon_json import coupon_document
from flatprep.report.coupon_text import coupon_text


@click.command("coupon")
@job_argument
@click.option("--out", "folder", required=True, type=click.Path(path_type=Path), help="folder for the drawings")
@said_about_parts
@output_format
def command(job_file: Path, folder: Path, said: JobOptions, form: str) -> None:
    """Draw sample cuts of a job's own slots and bores, each in steps around its size, to be cut and tried first.

    One drawing for each material, thickness and process. Ends with 0, also where there is nothing to try.
    """
    job = load_job(job_file, said)
    with progress_line() as progress:
        made = coupons_of(read_drawings(job, 1, progress))
    if made.coupons:
        write_coupons(made, folder)
    files = [str(folder / f"{one.stem}.dxf") if one.plates else "" for one in made.coupons]
    if form == "json":
        say(json.dumps(coupon_document(made.coupons, files, made.cautions), indent=1))
    else:
        say(coupon_text(made.coupons, files, made.cautions, job.units))
