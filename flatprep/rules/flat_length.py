"""flat-length: what each bend takes, by DIN 6935 and by measured K factors, and the legs that come out of the flat."""

from collections.abc import Iterator, Sequence
from math import radians

from flatprep.measure.bends import BendLine, bend_lines, legs_mm
from flatprep.model.drawing import Part
from flatprep.model.finding import Finding, Severity
from flatprep.practice.bends import MOST_DEG, Bend, bend, measured_k_factor
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Note the allowance of each kind of bend once a part, where thickness and inside radius are known."""
    asks = ctx.job_part.bends if ctx.job_part else ()
    if not ctx.thickness_mm or not asks:
        return
    for part in ctx.parts:
        kinds: dict[tuple[float, float], list[BendLine]] = {}
        for line in bend_lines(part.part, asks):
            if line.radius_mm and 0.0 < line.angle_deg <= MOST_DEG:
                kinds.setdefault((line.angle_deg, line.radius_mm), []).append(line)
        for (angle, radius), lines in kinds.items():
            yield _told(ctx, part.part, lines, bend(ctx.thickness_mm, radius, angle, own=ctx.own))


def _told(ctx: Context, part: Part, lines: Sequence[BendLine], din: Bend) -> Finding:
    head = f"{din.angle_deg:g}° at r {din.radius_mm:g} mm"
    many = f", {len(lines)} lines" if len(lines) > 1 else ""
    return Finding(
        rule=RULE.id,
        severity=RULE.severity,
        message=f"{head}{many}: the allowance is {din.allowance_mm:.2f} mm by DIN 6935, {_by_k(ctx, din)}"
        f"{_legs(part, lines, din)}",
        part=part.name,
        at=lines[0].middle,
        measured=din.allowance_mm,
        unit="mm",
        handles=tuple(line.handle for line in lines if line.handle),
    )


def _by_k(ctx: Context, din: Bend) -> str:
    """Give the allowance by the K factors of handbooks: angle (r + K t)."""
    measured = measured_k_factor(ctx.family or "", ctx.own)
    if measured is None:
        return "with no K factor measured for this material"
    least, most = (radians(din.angle_deg) * (din.radius_mm + k * din.thickness_mm) for k in measured)
    return f"{least:.2f} to {most:.2f} mm by the K-factor table (K {measured[0]:g} to {measured[1]:g})"


def _legs(part: Part, lines: Sequence[BendLine], din: Bend) -> str:
    """Say what comes out of the flat as drawn: each outside leg is half the deduction longer than its flat one."""
    flat = legs_mm(part, lines)[0] if len(lines) == 1 else ()
    if len(flat) == 2:
        a, b = (leg + din.deduction_mm / 2.0 for leg in flat)
        return f"; {sum(flat):.2f} mm flat make outside legs of {a:.2f} and {b:.2f} mm"
    return f"; an outside leg comes out {din.deduction_mm / 2.0:.2f} mm longer a bend than its flat"


RULE = Rule(
    id="flat-length",
    severity=Severity.NOTE,
    summary="The flat length allows for each bend by a figure that a coupon has to confirm.",
    why="The neutral fibre lies elsewhere for each brake, die and batch; tables differ by tenths of a millimetre.",
    remedy="Bend a coupon of known length from the same sheet, measure its legs, correct the flat by what they miss.",
    check=check,
)
