"""The checklist for people: per part a numbered line a step, tick boxes, cautions and the kit."""

from textwrap import wrap

from flatprep.model.work import Checklist, JointReport, Outcome, PartSteps, Step
from flatprep.report.figures import counted, length, place
from flatprep.report.words import lengths_in

_WIDTH = 110
_MOST_PLACES = 6


def checklist_text(checklist: Checklist, units: str = "mm") -> str:
    """Return the text of ``checklist``; lengths in `units`, drills by their own names."""
    lines: list[str] = []
    for part in checklist.parts:
        lines += [*_part(part, units), ""]
    if checklist.tools:
        lines += [
            "kit for the job",
            *(f"  [ ] {lengths_in(t.name, units)}  ({t.uses} x: {', '.join(t.parts)})" for t in checklist.tools),
            "",
        ]
    for joint in checklist.joints:
        lines += [*_joint(joint, units), ""]
    if checklist.cautions:
        lines += ["cautions", *(line for text in checklist.cautions for line in _wrapped(text, "  - "))]
    return "\n".join(lines).rstrip() + "\n"


def _part(part: PartSteps, units: str) -> list[str]:
    opposite = f" and {part.quantity_opposite} turned over" if part.quantity_opposite else ""
    lines = [f"{part.name}: {counted(part.quantity, 'piece')}{opposite}"]
    if part.flip:
        lines.append(f"  {part.flip}")
    for step in part.steps:
        lines += _step(step, units)
    return lines + [line for question in part.questions for line in _wrapped(lengths_in(question, units), "  ? ")]


def _step(step: Step, units: str) -> list[str]:
    head = f"  [ ] {step.order:>2}  {step.kind} {step.size}".rstrip()
    facts = [f"{step.count} x"] if step.at and step.count > 1 else []
    if step.tool:
        facts.append(lengths_in(step.tool, units))
    elif step.tool_dia_mm is not None:
        facts.append(f"dia {length(step.tool_dia_mm, units)}")
    if step.depth_mm is not None:
        facts.append(f"{length(step.depth_mm, units)} deep")
    if step.side:
        facts.append(f"side {step.side}")
    if step.cut_dia_mm is not None:
        facts.append(f"cut before to {length(step.cut_dia_mm, units)}")
    lines = [head + (": " + ", ".join(facts) if facts else "")]
    if step.at:
        shown = ", ".join(place(point, units) for point in step.at[:_MOST_PLACES])
        more = f" and {len(step.at) - _MOST_PLACES} more" if len(step.at) > _MOST_PLACES else ""
        lines.append(f"          at {shown}{more}")
    lines += _wrapped(lengths_in(step.note, units), "          ") if step.note else []
    lines += _wrapped(step.caution, "          ! ") if step.caution else []
    return lines


_MARK = {Outcome.GOOD: "ok", Outcome.BAD: "NO", Outcome.OPEN: "? "}


def _joint(joint: JointReport, units: str) -> list[str]:
    closes = "closes" if joint.closes else "does NOT close"
    lines = [f"joint {joint.name}: {closes}; {counted(joint.count, 'piece')} of {joint.buy or joint.fastener}"]
    for check in joint.checks:
        lines += _wrapped(lengths_in(f"{check.what}: {check.text}", units), f"  {_MARK[check.outcome]}  ")
    return lines


def _wrapped(text: str, lead: str) -> list[str]:
    return wrap(text, _WIDTH, initial_indent=lead, subsequent_indent=" " * len(lead))
