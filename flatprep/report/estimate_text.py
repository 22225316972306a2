"""An estimate for people."""

from flatprep.model.estimate import Estimate, PartEstimate, QuantityBreak, StockUse
from flatprep.report.columns import columns
from flatprep.report.figures import duration, length, mass, money, percent


def estimate_text(estimate: Estimate, breaks: tuple[QuantityBreak, ...] = (), *, units: str = "mm") -> str:
    """Return the table of parts, the stock, the totals and the notes."""
    blocks = [_parts(estimate, units)]
    if estimate.stock:
        blocks.append(_stock(estimate, units))
    blocks.append("\n".join(_totals(estimate)))
    if breaks:
        blocks.append(_breaks(breaks, estimate.currency))
    if estimate.notes:
        blocks.append("\n".join(f"note: {note}" for note in estimate.notes))
    return "\n\n".join(blocks)


def _parts(estimate: Estimate, units: str) -> str:
    head = [
        "part",
        "material",
        "thickness",
        "pieces",
        "mass each",
        "share",
        "cut length",
        "pierces",
        "cost each",
        "cost",
    ]
    rows = [_part(part, estimate.currency, units) for part in estimate.parts]
    return columns(head, rows, left=2)


def _part(part: PartEstimate, currency: str | None, units: str) -> list[str]:
    return [
        part.name,
        part.material or "–",
        length(part.thickness_mm, units),
        str(part.quantity),
        mass(part.mass_kg),
        percent(part.mass_share),
        length(part.cut_length_mm, units),
        str(part.pierces),
        money(part.material_cost, currency),
        money(part.line_cost, currency),
    ]


def _stock(estimate: Estimate, units: str) -> str:
    head = ["stock to take", "sheets", "length", "utilisation", "price", "cost"]
    return columns(head, [_use(use, estimate.currency, units) for use in estimate.stock])


def _use(use: StockUse, currency: str | None, units: str) -> list[str]:
    price = money(use.price, currency) + (" per m" if use.length_mm is not None and use.price is not None else "")
    taken = length(use.length_mm, units)
    return [use.name, str(use.count), taken, percent(use.utilisation), price, money(use.cost, currency)]


def _totals(estimate: Estimate) -> list[str]:
    sets = f" ({estimate.sets} sets)" if estimate.sets > 1 else ""
    limit = ""
    if estimate.mass_limit_kg is not None and estimate.mass_left_kg is not None:
        word = "left" if estimate.mass_left_kg >= 0.0 else "too much"
        limit = f" of {mass(estimate.mass_limit_kg)}, {mass(abs(estimate.mass_left_kg))} {word}"
    done = estimate.finished_mass_kg
    lighter = done is not None and estimate.mass_kg is not None and done < 0.999 * estimate.mass_kg
    lines = [
        f"mass {'of one set ' if estimate.sets > 1 else ''}{mass(estimate.mass_kg)}{limit}",
        f"material cost{sets} {money(estimate.material_cost, estimate.currency)}",
        f"utilisation {percent(estimate.utilisation)}",
    ]
    if lighter:
        lines.insert(1, f"after bench work {mass(done)}")
    if estimate.discount_percent:
        lines.append(f"discount {estimate.discount_percent.normalize():f} %")
    if estimate.credits:
        lines.append(f"credited for rests and scrap {money(estimate.credits, estimate.currency)}")
    if estimate.cut_time_s is not None:
        lines.append(f"cut time{sets} {duration(estimate.cut_time_s)}")
    if estimate.machine_cost is not None:
        lines.append(f"machine cost{sets} {money(estimate.machine_cost, estimate.currency)}")
    return lines


def _breaks(breaks: tuple[QuantityBreak, ...], currency: str | None) -> str:
    rows = [_break(one, currency) for one in breaks]
    return columns(["sets", "sheets", "not placed", "utilisation", "material cost", "per set"], rows, left=0)


def _break(one: QuantityBreak, currency: str | None) -> list[str]:
    counts = [str(one.sets), str(one.sheets), str(one.unplaced)]
    return [*counts, percent(one.utilisation), money(one.material_cost, currency), money(one.cost_per_set, currency)]
