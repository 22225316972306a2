"""What every key of a job file means; the README's tables are made from it."""

from flatprep.base.keys import Row

TOP = (
    Row(("name", "revision"), "of the job, on every page", "the file's name, none"),
    Row(("units",), "`mm`, `cm`, `m`, `in` or `ft`: of bare numbers here and of the lengths shown", "`mm`"),
    Row(("process",), "id or file of a process profile; a part may name its own", "needed"),
    Row(("spacing", "margin"), "between parts, and from the border", "the process's"),
    Row(("windows",), "whether parts may lie in the windows of others", "lasers yes, routers no"),
    Row(("sets",), "machines to build", "1"),
    Row(("mass_limit",), "kg of one set", "none"),
    Row(("tabs",), "whether parts too small to lie free are held by tabs", "`false`"),
    Row(
        ("pilots",),
        "holes that bench work opens up are cut `as-drawn`, `cut` at the recommended smaller diameter, or"
        " only centre-marked (`mark`)",
        "`as-drawn`",
    ),
    Row(
        ("relief",),
        "inside corners that the cutter does not reach are cut `as-drawn`, or opened with a `dogbone` or `t-bone`",
        "`as-drawn`",
    ),
    Row(
        ("slots",),
        "slots and notches drawn for the sheet are cut `as-drawn`, or as wide as it is `measured` "
        "(`measured_thickness` of the stock)",
        "`as-drawn`",
    ),
    Row(("slot_clearance",), "such slots are so much wider than the sheet", "0.1 mm"),
    Row(("parts",), "a cut list, beside or instead of `part` tables", "none"),
    Row(("currency",), "three letters", "none"),
    Row(
        ("layers",),
        'what layers are for: `{ BEND = "bend", ENGRAVE = "mark" }`; `cut`, `mark`, `bend` or `ignore`',
        "guessed from their names, and said",
    ),
    Row(("accept",), "findings that may stand: tables with `rule`, `reason` and, if wanted, `at`", "none"),
    Row(("material",), "tables `[material.ID]` with your own `density` or `price_per_kg`", "the profile's"),
    Row(("cost",), "a table, see below"),
    Row(
        ("first_article",),
        "whether one piece of each kind lies on the first sheet, where it takes no more stock, and is cut first",
        "`false`",
    ),
    Row(
        ("etch_labels", "etch_height"),
        "whether names and revisions are etched on the parts; least and largest height of the letters",
        "`false`, `[3, 10]` mm",
    ),
    Row(("rack",), "a folder with sheets and remnants to be used as stock, see below", "none"),
    Row(("stock", "part", "joint"), "tables, see below"),
)
"""The top of a job file."""

STOCK = (
    Row(("name", "material", "thickness"), 'what it is; `"16ga"` needs a metal with a gauge table', "needed"),
    Row(
        ("length", "width"),
        'along x and y; `length = "open"`: as much as needed, use as little as possible',
        "needed without outline",
    ),
    Row(("outline",), "an irregular remnant: a drawing, or a list of points"),
    Row(("count",), 'a number or `"any"`', "1"),
    Row(("price_per_sheet", "price_per_metre"), "the latter for open lengths; without one there is no cost", "none"),
    Row(("grain",), "rolling or face-grain direction: `length` or `width`", "none"),
    Row(("measured_thickness",), "what the calliper says", "none"),
    Row(("margins",), "left, right, bottom, top, where they differ from the job's `margin`", "the job's"),
    Row(
        ("keep_out",),
        "boxes `[x0, y0, x1, y1]` and circles `[x, y, radius]` for clamps and screws, with the room that "
        "the tool needs around them: nothing lies in them",
        "none",
    ),
)
"""``[[stock]]``, and a rack's."""

PART = (
    Row(("drawing",), "the DXF file", "needed"),
    Row(("name",), "", "the drawing's stem"),
    Row(("drawing_units",), "goes before the drawing's header", "the header"),
    Row(("material", "thickness", "process"), "", "the job's or the options'"),
    Row(("quantity", "quantity_opposite"), "pieces a set as drawn, and turned over (the other hand)", "1, 0"),
    Row(("turns",), 'allowed turns in degrees, or `"free"`', '`"free"`; with a face grain `[0, 180]`'),
    Row(("may_flip",), "may be turned over to save material", "`false`"),
    Row(("grain",), "`x` or `y`: this direction of the drawing lies along the stock's grain", "none"),
    Row(("layers", "accept"), "as at the top, for this part"),
    Row(
        ("corners",),
        "inside corners that matter for the fit: `all`, `square`, `none`, or a list of points",
        "lint: all; relief: square",
    ),
    Row(("revision", "note"), "on its pages", "none"),
    Row(("finish", "good_face"), "coating; the face that is seen, `A` or `B`", "none"),
    Row(("etch_label",), "whether its name and revision are etched on it", "as at the top"),
    Row(("tabs",), "whether this part is held by tabs, whatever its size", "as at the top"),
    Row(("filler",), "uses free space only, never costs a sheet", "`false`"),
    Row(("work", "bend"), "tables, see below"),
)
"""``[[part]]``."""

WORK = (
    Row(
        (
            "tap",
            "ream",
            "bore",
            "countersink",
            "counterbore",
            "clearance",
            "drill",
            "thread_insert",
            "press",
            "nut_pocket",
        ),
        'exactly one of them, with a size as the trade writes it: `"M5"`, `"6 H7"`, `"M5 ISO 10642"`',
        "needed",
    ),
    Row(("hole", "at"), "the holes by their drawn diameter, or by their places", "needed, one of them"),
    Row(("count",), "so many holes must match, else it is an error", "not checked"),
    Row(("side",), "`A` or `B`: from where it is worked"),
    Row(("depth",), "makes it blind", "through"),
    Row(("note",), "repeated on the bench sheet", "none"),
)
"""``[[part.work]]``; the first row holds the kinds of work."""

BEND = (
    Row(("line", "layer"), "two points, or the layer that the bend is drawn on", "needed, one of them"),
    Row(("angle",), "turned, in degrees", "needed"),
    Row(("radius",), "inside radius", "not known"),
    Row(("direction",), "`up` or `down`", "not known"),
)
"""``[[part.bend]]``."""

JOINT = (
    Row(("name",), "of the joint", "the fastener"),
    Row(("fastener",), 'such as `"M8 ISO 4017"`', "needed"),
    Row(("count",), "in one set", "1"),
    Row(("length",), "of the fastener", "proposed"),
    Row(("nut",), 'its size, such as `"M8"`', "none"),
    Row(("through",), "`[[joint.through]]` tables, in order from the head", "needed"),
)
"""``[[joint]]``."""

LAYER = (
    Row(("part", "spacer"), "a part of this job, or the name of something else that is passed", "needed, one of them"),
    Row(("thickness",), "of the spacer", "the part's"),
    Row(("hole", "at"), "which hole of the part: its drawn diameter, or its place"),
    Row(("threaded",), "whether the thread is here", "`false`"),
)
"""``[[joint.through]]``."""

COST = (
    Row(("share",), "how stock is shared out: `net-area`, `box-area` or `used-length`", "`net-area`"),
    Row(("machine_rate",), "of an hour of cutting", "the process's"),
    Row(
        ("offcut_credit", "offcut_least"),
        "share of the price, 0 to 1, that an offcut of at least these sides is credited",
        "0, `[300, 300]` mm",
    ),
    Row(("scrap_per_kg",), "what the rest brings", "0"),
    Row(("discount",), "tables with `from` (an amount) and `percent`", "none"),
    Row(("breaks",), "numbers of sets to compare", "`[1, 2, 5, 10, 25]`"),
)
"""``[cost]``."""

RACK = (
    Row(("units",), "of its bare numbers", "`mm`"),
    Row(("remnant_price",), "of a remnant whose drawing states none", "none"),
    Row(("offcut_least",), "the sides of the smallest offcut that `book` keeps, such as `[300, 200]`"),
    Row(
        ("stock",),
        "`[[stock]]` tables as above, whose counts may be 0; an `outline` names a drawing of the rack "
        "that says nothing of itself",
        "none",
    ),
)
"""The top of a rack's ``stock.toml``."""
