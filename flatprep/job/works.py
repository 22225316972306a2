"""Bench work, bends and joints of a job file."""

from flatprep.base.keys import keys_of
from flatprep.job import reference
from flatprep.job.context import Context
from flatprep.job.values import BendAsk, JointAsk, JointLayer, Point, Work
from flatprep.profile.toml_check import Table

KINDS = reference.WORK[0].keys
"""The kinds of bench work; exactly one of them is the key of a ``[[part.work]]``."""

WORK_KEYS = keys_of(reference.WORK)
BEND_KEYS = keys_of(reference.BEND)
JOINT_KEYS = keys_of(reference.JOINT)
LAYER_KEYS = keys_of(reference.LAYER)


def read_work(table: Table, context: Context) -> Work:
    """Check one ``[[part.work]]``."""
    table.only(WORK_KEYS)
    kinds = [kind for kind in KINDS if table.has(kind)]
    listed = ", ".join(KINDS)
    if len(kinds) != 1:
        given = " and ".join(kinds) or "nothing"
        raise table.error(f"{table.place}: {given} to do", f"give exactly one of {listed}; two works are two tables")
    hole, at = _holes(table, context)
    return Work(
        kind=kinds[0],
        size=_size(table, kinds[0], context),
        hole_mm=hole,
        at=at,
        count=table.integer("count", least=1) if table.has("count") else None,
        side=table.choice("side", ("A", "B")) if table.has("side") else None,
        where=table.place,
        depth_mm=context.length_mm(table, "depth", above=0.0) if table.has("depth") else None,
        note=table.text("note", ""),
    )


def _holes(table: Table, context: Context) -> tuple[float | None, tuple[Point, ...]]:
    if table.has("hole") == table.has("at"):
        both = "both hole and at" if table.has("hole") else "neither hole nor at"
        raise table.error(
            f"{table.place}: {both} given", "name the holes by their drawn diameter (hole) or by their places (at)"
        )
    if table.has("hole"):
        return context.length_mm(table, "hole", above=0.0), ()
    at = context.points_mm(table, "at")
    if not at:
        raise table.fail("at", "a list of one point or more, such as [[10, 20]]")
    return None, at


def _size(table: Table, kind: str, context: Context) -> str:
    """Return the size as written; a bare number is a diameter in the job's unit, given back in mm."""
    value = table.get(kind)
    if isinstance(value, int | float) and not isinstance(value, bool):
        return f"{context.length_mm(table, kind, above=0.0):.6g}"
    return table.text(kind)


def read_bend(table: Table, context: Context) -> BendAsk:
    """Check one ``[[part.bend]]``."""
    table.only(BEND_KEYS)
    if table.has("line") == table.has("layer"):
        both = "both line and layer" if table.has("line") else "neither line nor layer"
        raise table.error(f"{table.place}: {both} given", "name the bend by its line, or by the layer it is drawn on")
    line = None
    if table.has("line"):
        ends = context.points_mm(table, "line")
        if len(ends) != 2 or ends[0] == ends[1]:
            raise table.fail("line", "two different points, such as [[0, 20], [80, 20]]")
        line = (ends[0], ends[1])
    angle = table.number("angle", above=0.0)
    if angle > 180.0:
        raise table.fail("angle", "degrees above 0, up to 180")
    return BendAsk(
        angle_deg=angle,
        radius_mm=context.length_mm(table, "radius", least=0.0) if table.has("radius") else None,
        line=line,
        layer=table.text("layer") if table.has("layer") else None,
        where=table.place,
        direction=table.choice("direction", ("up", "down")) if table.has("direction") else None,
    )


def read_joint(table: Table, context: Context, names: tuple[str, ...]) -> JointAsk:
    """Check one ``[[joint]]``; `names` are the job's parts."""
    table.only(JOINT_KEYS)
    layers = table.tables("through")
    if not layers:
        raise table.need("through", "[[joint.through]] with part = ..., one for each thing the fastener passes")
    fastener = table.text("fastener")
    return JointAsk(
        name=table.text("name", fastener),
        fastener=fastener,
        through=tuple(_layer(one, context, names) for one in layers),
        length_mm=context.length_mm(table, "length", above=0.0) if table.has("length") else None,
        nut=table.text("nut", ""),
        count=table.integer("count", 1, least=1),
        where=table.place,
    )


def _layer(table: Table, context: Context, names: tuple[str, ...]) -> JointLayer:
    table.only(LAYER_KEYS)
    if table.has("part") == table.has("spacer"):
        raise table.error(
            f"{table.place}: give either part or spacer", 'part = "leaf" of this job, or spacer = "washer"'
        )
    if table.has("spacer") and not table.has("thickness"):
        raise table.need("thickness", "the spacer's thickness")
    return JointLayer(
        part=table.choice("part", names) if table.has("part") else None,
        spacer=table.text("spacer", ""),
        thickness_mm=context.thickness_mm(table, "thickness", None) if table.has("thickness") else None,
        hole_mm=context.length_mm(table, "hole", above=0.0) if table.has("hole") else None,
        at=context.point_mm(table, "at") if table.has("at") else None,
        threaded=table.flag("threaded"),
        where=table.place,
    )
