"""Writes job files for tests, with the (empty) drawings they name."""

from pathlib import Path

DRAWINGS = ("leaf.dxf", "plate.dxf", "rest-07.dxf")

FULL = """
name = "wheel hoe"
revision = "B"
units = "mm"
process = "fibre-laser"
spacing = 3.5
margin = "1in"
sets = 6
mass_limit = 12.5
pilots = "cut"
currency = "EUR"
windows = false

[layers]
FOLD = "bend"

[material.mild-steel]
density = 7800
price_per_kg = 1.15

[cost]
share = "box-area"
machine_rate = 60.5
offcut_credit = 0.5
offcut_least = [400, 200]
scrap_per_kg = 0.3
breaks = [10, 1, 5, 5]
[[cost.discount]]
from = 500
percent = 7.5
[[cost.discount]]
from = 100
percent = 2

[[stock]]
name = "al3"
material = "al-5052-h32"
thickness = 3
length = 2500
width = 1250
count = 2
price_per_sheet = 96.05
grain = "length"
measured_thickness = 2.9
margins = [10, "1in", 8, 0]
keep_out = [[0, 600, 60, 660]]

[[stock]]
name = "strip"
material = "S235"
thickness = "16ga"
length = "open"
width = "4ft"
count = "any"
price_per_metre = 40

[[stock]]
name = "rest"
material = "al-5052-h32"
thickness = 3
outline = [[0, 0], [900, 0], [700, 400], [0, 0]]

[[stock]]
name = "drawn rest"
material = "al-5052-h32"
thickness = 3
outline = "rest-07.dxf"

[[part]]
drawing = "leaf.dxf"
name = "leaf"
drawing_units = "in"
material = "al-5052-h32"
thickness = 3
quantity = 12
quantity_opposite = 2
turns = [0, 90, 180, 270]
may_flip = true
grain = "x"
layers = { ETCH = "mark" }
filler = true
finish = "powder"
good_face = "A"
revision = "C"
note = "handle"
[[part.accept]]
rule = "thin-web"
reason = "tested"
at = [10, 20]
[[part.work]]
hole = 4.2
count = 4
tap = "M5"
side = "A"
[[part.work]]
at = [[10, 12], ["1in", 0]]
ream = "6 H7"
[[part.work]]
hole = 6
drill = 6.35
depth = 2
note = "blind"
[[part.bend]]
line = [[0, 20], [80, 20]]
angle = 90
radius = 3
[[part.bend]]
layer = "BEND"
angle = 45.5
direction = "up"

[[part]]
drawing = "plate.dxf"
material = "mild-steel"
thickness = "1/4in"

[[joint]]
name = "pivot"
fastener = "shoulder 1/4"
nut = "10-24"
count = 2
[[joint.through]]
part = "leaf"
hole = 6.5
[[joint.through]]
spacer = "washer"
thickness = 1.6
[[joint.through]]
part = "plate"
at = [5, 6]
threaded = true
"""


def write_job(folder: Path, text: str) -> Path:
    """Write ``job.toml`` and the drawings it may name; return the job's path."""
    for name in DRAWINGS:
        (folder / name).touch()
    path = folder / "job.toml"
    path.write_text(text)
    return path
