"""What every key of a profile means; the README's tables are made from it."""

from flatprep.base.keys import Row

PROCESS = (
    Row(("name", "kind", "beam", "power", "source", "caution"), "what it is; `beam` is `fibre` or `co2`, for lasers"),
    Row(("kerf", "tool_diameter"), "mm; the kerf of a router is its tool"),
    Row(("spacing", "margin", "windows"), "what a nest takes where the job says nothing"),
    Row(
        ("direct_tap_up_to", "pilot_under"),
        "mm of soft metal that is cut to the tap drill and tapped directly; how far a hole is cut under "
        "its tap drill elsewhere",
    ),
    Row(("bed", "slat_pitch"), "length and width of the machine; pitch of the grate's slats"),
    Row(
        ("limits", "warn"),
        "least sizes: `hole`, `web`, `slot`, `part`, `inside_corner`, `edge`, each as `NAME_min` in mm, "
        "`NAME_to_thickness`, `NAME_to_tool`, `NAME_to_kerf`, the largest rules; `join_gap` in "
        "`[limits]`: ends this near are one point",
    ),
    Row(("sources",), "where the limits of a feature are from"),
    Row(("thickness",), "least and most that it cuts"),
    Row(
        ("tabs",),
        "a table: `count` tabs a part at the least, one for `every` mm of its outline, as wide as the "
        "larger of `width` and `width_to_thickness` times the thickness; `source`",
    ),
    Row(("kerf_table", "feed_mm_min", "pierce_s"), "pairs of thickness and value; without feeds there is no cut time"),
    Row(("machine_rate",), "cost of an hour"),
    Row(("band",), "other limits `above` or `upto` a thickness"),
    Row(("family",), "tables `[family.aluminium]` with their own limits, thickness, feeds and bands"),
)
"""The top of a process profile."""

MATERIAL = (
    Row(("name", "aliases", "family", "source"), "what it is called; whose limits it follows"),
    Row(("density", "density_range"), "kg/m³"),
    Row(("price_per_kg",), "yours"),
    Row(("face_grain",), "plywood and the like: half turns only"),
    Row(
        ("elastic_modulus", "strength", "strength_kind", "mechanical_source", "hardness"),
        "GPa, MPa, `yield`, `tensile` or `flexural`",
    ),
    Row(("gauge",), "the gauge table it follows: `steel`, `stainless`, `aluminium`, `galvanised`"),
    Row(("stock", "stock_source"), "thicknesses usually sold, mm"),
    Row(("tap", "tap_note"), "`good`, `fair`, `poor` or `no`"),
    Row(("cautions", "hazards"), "said wherever it is worked"),
    Row(
        ("bend",),
        "least inside radius by thickness, by how much larger it is along the grain (`along_grain`), and "
        "whether bends must cross it (`across_only`)",
    ),
    Row(
        ("cut",),
        "tables `[cut.fibre-laser]`: `verdict` `yes`, `care`, `no` or `never`, with `why`, `caution` and `source`",
    ),
)
"""A material profile."""
