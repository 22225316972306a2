"""The report page and the bench sheets: self-contained HTML that asks nobody for anything.

The page carries its style, script and pictures; a Content-Security-Policy in it forbids everything else, and names
style and script by their hashes, so that markup in a drawing's names could not run even if it were not escaped.
"""

import base64
import hashlib
import re
from functools import cache
from urllib.parse import quote

from jinja2 import Environment, PackageLoader, StrictUndefined
from markupsafe import Markup, escape

from flatprep.report import figures as show
from flatprep.report.bundle import Bundle, PartCard
from flatprep.report.charts import search_plot
from flatprep.report.overview import figures, verdict
from flatprep.report.part_figure import sign
from flatprep.report.sheet_figure import shape_defs
from flatprep.report.views import part_view, part_views, shapes_of, sheet_views
from flatprep.report.words import lengths_in


def report_html(bundle: Bundle) -> str:
    """Return the report of a whole job as one HTML document.

    Parameters
    ----------
    bundle
        Everything that is shown; the same bundle gives the same text.
    """
    views = part_views(bundle)
    shapes = shapes_of(views)
    return _render(
        "report.html.j2",
        bundle,
        views=views,
        verdict=verdict(bundle),
        figures=figures(bundle),
        sheets=sheet_views(bundle, shapes),
        shapes=Markup(shape_defs(shapes)),
        plot=Markup(search_plot(bundle.search, bundle.units)),
        tools=bundle.checklist.tools if bundle.checklist else (),
        joints=bundle.checklist.joints if bundle.checklist else (),
        priced=any(card.estimate and card.estimate.line_cost is not None for card in bundle.cards),
        unplaced=bundle.layout.unplaced if bundle.layout else (),
        stock=bundle.estimate.stock if bundle.estimate else (),
        cautions=_cautions(bundle),
        assumed=(*bundle.assumed, *(bundle.estimate.notes if bundle.estimate else ())),
    )


def bench_sheet_html(bundle: Bundle, card: PartCard) -> str:
    """Return the printable bench sheet of one part: title block, picture with numbers, steps with boxes to tick."""
    return _render("bench.html.j2", bundle, view=part_view(bundle, card), cautions=_cautions(bundle))


def _cautions(bundle: Bundle) -> tuple[str, ...]:
    asked = bundle.checklist.cautions if bundle.checklist else ()
    return tuple(dict.fromkeys((*bundle.cautions, *asked)))


def _render(template: str, bundle: Bundle, **values: object) -> str:
    environment = _environment(bundle.units, bundle.estimate.currency if bundle.estimate else None)
    return environment.get_template(template).render(bundle=bundle, job_key=_job_key(bundle), **values)


@cache
def _environment(units: str, currency: str | None) -> Environment:
    environment = Environment(
        loader=PackageLoader("flatprep.report"), autoescape=True, undefined=StrictUndefined, trim_blocks=True,
        lstrip_blocks=True,
    )  # fmt: skip
    environment.filters |= {
        "mm": lambda value: show.length(value, units),
        "mm_or_blank": lambda value: "" if value is None else show.length(value, units),
        "measure": lambda value, unit: show.measure(value, unit, units),
        "place": lambda at: show.place(at, units),
        "mass": show.mass,
        "money": lambda amount: show.money(amount, currency),
        "percent": show.percent,
        "counted": show.counted,
        "duration": show.duration,
        "capital": lambda words: lengths_in(show.capital(words), units),
        "sentence": lambda words: lengths_in(show.sentence(words), units),
        "words": lambda words: lengths_in(words, units),
        "sign": lambda kind, words: Markup(sign(kind, str(words))),
        "foldable": foldable,
        "relative": lambda file: "./" + quote(file),
    }
    for name in environment.list_templates():  # all at once: the last ones are wanted when a run is asked to end
        environment.get_template(name)
    style = environment.get_template("page.css.j2").render().strip()
    script = environment.get_template("page.js").render().strip()
    environment.globals |= {
        "style": Markup(style),
        "script": Markup(script),
        "style_hash": _csp_hash(style),
        "script_hash": _csp_hash(script),
    }
    return environment


def foldable(name: str) -> Markup:
    """Return a name that may be broken after its underscores, dashes, points, strokes and number signs."""
    return Markup("<wbr>").join(escape(piece) for piece in re.findall(r"[^_/#.-]*[_/#.-]+|[^_/#.-]+", name))


def _csp_hash(text: str) -> str:
    return "sha256-" + base64.b64encode(hashlib.sha256(text.encode()).digest()).decode()


def _job_key(bundle: Bundle) -> str:
    """Under this name the browser keeps the ticks; the same job made again finds them."""
    return hashlib.sha256(f"{bundle.name}\n{bundle.revision}".encode()).hexdigest()[:16]
