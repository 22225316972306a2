"""Coupons in words: what is on each, how to use it, and what to mind."""

from collections.abc import Iterator, Sequence
from textwrap import wrap

from flatprep.model.coupon import Coupon, Trial
from flatprep.report.figures import bare_length, counted, length, size
from flatprep.report.words import lengths_in

_WIDTH = 110
NOTHING = (
    "nothing to try first: no slot is drawn for a sheet of the job, and no hole is to be reamed, bored or pressed into"
)
HOW = (
    "Cut the coupon first, from the sheet that the job will be cut from and with the same settings; take off burr and "
    "dross.",
    "The corner that is cut off marks the smallest size of the first row; sizes stand on layer NOTE, which is not cut.",
    "Push the edge of the mating sheet into the notches, the pin, ring or gauge into the bores. The size that goes in "
    "as it should is the one to draw; the one in brackets is what the job has now.",
    'Slots: measure the mating sheet, write measured_thickness into its [[stock]], slots = "measured" into the job, '
    "and slot_clearance = the notch's size less that.",
    "Bores: where every size is off by the same, mend the kerf offset of the machine, not the drawing. A hole that is "
    "reamed or bored afterwards must come out smaller than its finish.",
    "A coupon holds for its sheet, machine and settings: the next batch needs another.",
)


def coupon_text(coupons: Sequence[Coupon], files: Sequence[str], cautions: Sequence[str], units: str = "mm") -> str:
    """Return the text of ``coupon``.

    Parameters
    ----------
    coupons
    files
        Where each was written; empty for one without a drawing.
    cautions
    units
        Of the job.
    """
    if not coupons:
        return NOTHING
    lines = []
    for one, file in zip(coupons, files, strict=True):
        lines += [*_coupon(one, file, units), ""]
    lines += ["how to use it", *(row for n, text in enumerate(HOW, 1) for row in _wrapped(text, f"  {n}  ")), ""]
    lines += ["cautions", *(row for text in cautions for row in _wrapped(text, "  - "))]
    return "\n".join(lines)


def _coupon(one: Coupon, file: str, units: str) -> Iterator[str]:
    held = f"({one.material}, {length(one.thickness_mm, units)}, {one.process})"
    if one.plates:
        sizes = ", ".join(size(*part.size_mm, units) for part in one.plates)
        yield f"{file}  {held}: {counted(len(one.plates), 'plate')}, {sizes}"
    else:
        yield f"no coupon  {held}"
    for trial in one.trials:
        what = f"{trial.kind} for {lengths_in(trial.mate, units)} ({', '.join(trial.parts)})"
        yield f"  {what}: {_sizes(trial, units)} {units}"
    for words in one.left_out:
        yield f"  left out: {lengths_in(words, units)}"


def _sizes(trial: Trial, units: str) -> str:
    shown = ((s, bare_length(s, units)) for s in trial.sizes_mm)
    return "  ".join(f"[{words}]" if abs(s - trial.wanted_mm) < 1e-6 else words for s, words in shown)


def _wrapped(text: str, lead: str) -> list[str]:
    return wrap(text, _WIDTH, initial_indent=lead, subsequent_indent=" " * len(lead))
