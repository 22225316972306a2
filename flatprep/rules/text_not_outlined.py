"""text-not-outlined: letters that stand as text on a part."""

from collections.abc import Iterator

from flatprep.drawing.roles import role_of
from flatprep.model.drawing import Part, Role, Text
from flatprep.model.finding import Finding, Severity
from flatprep.practice.callouts import parse_callouts
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Warn of texts on a part, once for each part; texts elsewhere, and on layers that are not cut, are notes."""
    roles = {layer: role for layer, role, _ in ctx.drawing.roles}
    on_part: dict[str, list[Text]] = {}
    elsewhere: list[Text] = []
    for text in ctx.drawing.texts:
        home = next((p.name for p in ctx.drawing.parts if _over(p, text)), None)
        # a layer that holds texts only has no role yet: its name says what it is for
        role = roles.get(text.layer) or role_of(text.layer, "", {}, off=False).role
        if home is None or role is not Role.CUT or _annotates(ctx, text):
            elsewhere.append(text)
        else:
            on_part.setdefault(home, []).append(text)
    for name, texts in on_part.items():
        yield _told(Severity.WARNING, texts, "stands as text on the part and will not be cut", name)
    if elsewhere:
        yield _told(Severity.NOTE, elsewhere, "is taken as a note, not cut", None)


def _annotates(ctx: Context, text: Text) -> bool:
    """Tell whether a text speaks of the part instead of being cut into it: it has a leader, or calls out a hole."""
    return bool(text.points_to) or bool(parse_callouts(text.text, ctx.drawing.units))


def _over(part: Part, text: Text) -> bool:
    x0, y0, x1, y1 = part.outer.bounds
    return x0 <= text.at[0] <= x1 and y0 <= text.at[1] <= y1


def _told(severity: Severity, texts: list[Text], what: str, part: str | None) -> Finding:
    words = " ".join(texts[0].text.split())
    quoted = f"“{words[:40]}…”" if len(words) > 40 else f"“{words}”"
    more = f" and {len(texts) - 1} more" if len(texts) > 1 else ""
    return Finding(
        rule=RULE.id,
        severity=severity,
        message=f"{quoted}{more} {what}",
        part=part,
        at=texts[0].at,
        handles=tuple(t.handle for t in texts if t.handle),
    )


RULE = Rule(
    id="text-not-outlined",
    severity=Severity.WARNING,
    summary="A text on the part is no outline.",
    why="Machines cut lines, not fonts: the letters would be missing from the part.",
    remedy="Turn the text into outlines, or put it on a layer for notes.",
    check=check,
)
