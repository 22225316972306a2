"""A drawing read: from a file to parts, with everything that was noticed on the way."""

from collections.abc import Mapping
from contextlib import suppress
from dataclasses import dataclass, field, replace
from pathlib import Path

from flatprep.base.errors import DrawingError
from flatprep.base.names import one_line
from flatprep.base.tolerances import DEFAULT, Tolerances
from flatprep.base.units import MM_PER_UNIT
from flatprep.drawing.assign import assign
from flatprep.drawing.collect import Collected, CollectOptions, collect
from flatprep.drawing.frame import without_frames
from flatprep.drawing.leaders import with_leaders
from flatprep.drawing.limits import LIMITS, ReadLimits
from flatprep.drawing.load import UNIT_OF_CODE, Loaded, load, load_whole
from flatprep.drawing.outline import Outlines, outlines
from flatprep.drawing.plausible import doubtful_units
from flatprep.drawing.tree import parts_of
from flatprep.drawing.upright import laid_flat
from flatprep.model.drawing import Contour, Curve, Drawing, Fault, Role, UnitsFrom


@dataclass(frozen=True, slots=True)
class ReadOptions:
    """What the user says about drawings.

    Attributes
    ----------
    units
        A key of `MM_PER_UNIT` that goes before every header, or None.
    roles
        Layer name -> role, before every guess.
    """

    units: str | None = None
    roles: Mapping[str, Role] = field(default_factory=dict)
    tol: Tolerances = DEFAULT
    limits: ReadLimits = LIMITS


def read(path: Path, options: ReadOptions | None = None, *, name: str | None = None) -> Drawing:
    """Read a drawing.

    Parameters
    ----------
    path
        A DXF file.
    options
        See `ReadOptions`.
    name
        Name of its part; the file's stem by default.

    Returns
    -------
    Drawing
        Everything in mm.

    Raises
    ------
    DrawingError
        When the file cannot be read at all or passes a cap; the message begins with the path.
    """
    options = options or ReadOptions()
    drawing = _read(path, load(path, options.limits), options, name)
    whole = None if drawing.parts else load_whole(path, options.limits)
    flat = laid_flat(whole) if whole else None
    if flat is None:
        return drawing
    with suppress(DrawingError):
        turned = _read(path, flat.loaded, options, name)
        if turned.parts:
            return replace(turned, faults=(*turned.faults, Fault("off-plane", detail=flat.told)))
    return drawing


def _read(path: Path, loaded: Loaded, options: ReadOptions, name: str | None) -> Drawing:
    units, origin, faults = _units(loaded, options.units)
    ask = CollectOptions(MM_PER_UNIT[units], options.roles, options.tol.curve_mm, options.limits)
    try:
        found = collect(loaded, ask)
    except DrawingError as err:
        raise DrawingError(f"{path}: {err.message}", err.remedy) from err
    except (ArithmeticError, AttributeError, LookupError, RecursionError, TypeError, ValueError) as err:
        # ezdxf meets damaged entities only when they are touched
        raise DrawingError(
            f"{path}: damaged ({str(err)[:120] or type(err).__name__})", "export the drawing again"
        ) from err
    if loaded.conflicts:
        faults.append(Fault("unsupported-entity", detail="version-control conflict markers: the first side was read"))
    if loaded.cut_short:
        faults.append(Fault("unsupported-entity", detail="the file ends too early: what stood at its end is missing"))
    cut, roles = _cut_curves(found)
    shapes = outlines(cut, options.tol)
    contours, nest, frames = without_frames([c.contour for c in shapes.rings], shapes.shapes)
    parts = parts_of(contours, nest, one_line(name or path.stem))
    given = assign(parts, _others(found, shapes))
    if origin is not UnitsFrom.OPTION:
        faults += doubtful_units(parts, units)
    return Drawing(
        file=str(path),
        units=units,
        units_from=origin,
        parts=given.parts,
        faults=(*faults, *found.faults, *_guesses(found), *shapes.faults, *map(_told_frame, frames), *given.faults),
        skipped=tuple(found.skipped),
        texts=with_leaders(found.texts, loaded.document, MM_PER_UNIT[units]),
        roles=roles,
        linetypes=_linetypes(found),
        recovered=loaded.recovered,
        loose=shapes.loose,
        crossing=tuple(c.contour for c in shapes.crossing),
        simplified=tuple(found.simplified),
        digest=loaded.digest,
    )


def _units(loaded: Loaded, said: str | None) -> tuple[str, UnitsFrom, list[Fault]]:
    code = loaded.unit_code
    if said is not None:
        return said, UnitsFrom.OPTION, []
    if code in UNIT_OF_CODE:
        return UNIT_OF_CODE[code], UnitsFrom.HEADER, []
    if code:
        detail = f"its header names unit {code} of $INSUNITS, which no shop draws in; taken as mm"
    else:
        detail = "no header says which unit it is drawn in; taken as mm"
    return "mm", UnitsFrom.ASSUMED, [Fault("unknown-units", detail=detail)]


def _cut_curves(found: Collected) -> tuple[list[Curve], tuple[tuple[str, Role, str], ...]]:
    """Curves to cut, and the role of every layer.

    Where guesses leave nothing to cut, those guesses were wrong: everything on guessed layers is cut.
    """
    cut = [c for c, role in found.curves if role is Role.CUT]
    if not cut and found.curves:
        cut = [c for c, _ in found.curves if found.roles[c.layer].why != "as said"]
        roles = {
            n: g if g.why == "as said" else type(g)(Role.CUT, "no other layer is cut") for n, g in found.roles.items()
        }
        found.roles.update(roles)
        found.linetypes.clear()
        found.curves[:] = [(c, found.roles[c.layer].role) for c, _ in found.curves]
    return cut, tuple((n, g.role, g.why) for n, g in sorted(found.roles.items()))


def _told_frame(frame: Contour) -> Fault:
    x0, y0, x1, y1 = frame.bounds
    detail = f"the rectangle {x1 - x0:g} x {y1 - y0:g} mm around everything is taken as the sheet's border, not cut"
    return Fault("layer-role", (x0, y0), None, frame.distinct_handles, detail)


def _linetypes(found: Collected) -> tuple[tuple[str, str, Role, str], ...]:
    """Linetypes whose lines are not cut on layers that are."""
    return tuple(
        (layer, kind, guess.role, guess.why)
        for (layer, kind), guess in sorted(found.linetypes.items())
        if found.roles[layer].role is Role.CUT
    )


def _guesses(found: Collected) -> list[Fault]:
    """Every layer that is not cut because of a guess, and every linetype on others, said once each."""
    told = [
        f"layer “{name}” is taken as {guess.role}: {guess.why}"
        for name, guess in sorted(found.roles.items())
        if guess.role is not Role.CUT and guess.why != "as said"
    ]
    told += [
        f"{kind} lines on layer “{name}” are taken as {role}: {why}" for name, kind, role, why in _linetypes(found)
    ]
    return [Fault("layer-role", detail=words) for words in told]


def _others(found: Collected, shapes: Outlines) -> list[tuple[Curve, Role]]:
    """Curves that are not cut: those of other roles, and shared edges inside outlines."""
    by_role: list[tuple[Curve, Role]] = [(c, role) for c, role in found.curves if role in (Role.MARK, Role.BEND)]
    return by_role + [(c, Role.MARK) for c in shapes.inner]
