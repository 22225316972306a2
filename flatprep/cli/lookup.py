"""``flatprep lookup``."""

import json
from pathlib import Path

import click

from flatprep.base.units import parse_length_mm
from flatprep.cli.options import output_format
from flatprep.cli.talk import say
from flatprep.practice.lookup import KINDS, lookup
from flatprep.profile.gauges import parse_thickness_mm
from flatprep.profile.material_load import load_material
from flatprep.report.lookup_json import lookup_document
from flatprep.report.lookup_text import lookup_text


@click.command("lookup")
@click.argument("kind", metavar=f"KIND ({', '.join(KINDS)})")
@click.argument("name", default="")
@click.option("--thickness", metavar="VALUE", help="3, 3mm, 1/8in, 16ga")
@click.option("--radius", metavar="VALUE", help="inside bend radius")
@click.option("--angle", type=float, help="bend angle, degrees turned")
@click.option("--material", metavar="ID", help="material id or designation")
@click.option(
    "--profiles", "folders", metavar="DIR", multiple=True, type=click.Path(path_type=Path), help="own profiles"
)
@output_format
def command(
    kind: str,
    name: str,
    thickness: str | None,
    radius: str | None,
    angle: float | None,
    material: str | None,
    folders: tuple[Path, ...],
    form: str,
) -> None:
    """Ask the hardware and material tables: ``flatprep lookup thread M6``."""
    of = load_material(material, folders) if material else None
    answer = lookup(
        kind,
        name,
        thickness_mm=parse_thickness_mm(thickness, "mm", of) if thickness else None,
        radius_mm=parse_length_mm(radius) if radius else None,
        angle_deg=angle,
        material=of,
        own=folders,
    )
    say(json.dumps(lookup_document(answer), indent=1) if form == "json" else lookup_text(answer))
