"""Options that several commands share, each written once."""

from collections.abc import Callable
from functools import wraps
from pathlib import Path
from typing import Any, TypeVar

import click

from flatprep.base.errors import UsageError
from flatprep.base.units import MM_PER_UNIT
from flatprep.drawing.forms import Form
from flatprep.job.context import JobOptions
from flatprep.model.drawing import Role
from flatprep.nest.problem import Budget

Command = TypeVar("Command", bound=Callable[..., Any])


def output_format(command: Command) -> Command:
    """Add ``--format``."""
    return click.option(
        "--format",
        "form",
        type=click.Choice(["text", "json"]),
        default="text",
        help="text for people, or one JSON document",
    )(command)


def said_about_parts(command: Callable[..., Any]) -> Any:
    """Add what is said about parts; the command gets it as ``said``, a `JobOptions`.

    These are ``--process``, ``--material``, ``--thickness``, ``--units``, ``--layer`` and ``--profiles``.
    """

    @wraps(command)
    def joined(*args: Any, **words: Any) -> Any:
        said = JobOptions(
            profile_folders=words.pop("folders"),
            layers=parse_roles(words.pop("layers")),
            anywhere=words.pop("anywhere", False),
            rack=words.pop("rack", None),
            etch=words.pop("etch", False),
            first_article=words.pop("first_article", False),
            **{key: words.pop(key) for key in ("process", "material", "thickness", "units")},
        )
        return command(*args, said=said, **words)

    return _with_options(
        joined,
        click.option("--profiles", "folders", metavar="DIR", multiple=True, type=click.Path(path_type=Path),
                     help="own profiles, looked up before the shipped ones"),
        click.option("--layer", "layers", metavar="NAME=ROLE", multiple=True,
                     help="what a layer is for: cut, mark, bend or ignore"),
        click.option("--units", type=click.Choice(list(MM_PER_UNIT)),
                     help="take every drawing as being in this unit, whatever its header says"),
        click.option("--thickness", metavar="VALUE", help="3, 3mm, 0.125in, 1/8in or 16ga"),
        click.option("--material", metavar="ID", help="material id or designation"),
        click.option("--process", metavar="ID|FILE", help="process id or profile file"),
    )  # fmt: skip


def rack_option(command: Command) -> Command:
    """Add ``--rack``, for a command that has `said_about_parts`; stands above it."""
    return click.option(
        "--rack", metavar="DIR", type=click.Path(path_type=Path), help="sheets and remnants of the workshop, as stock"
    )(command)


def cutting_wishes(command: Command) -> Command:
    """Add ``--etch`` and ``--first-article``, for a command that has `said_about_parts`; stands above it."""
    command = click.option("--etch", is_flag=True, help="etch each part's name and revision on it (layer MARK)")(
        command
    )
    return click.option(
        "--first-article", is_flag=True, help="one piece of each kind on the first sheet, and cut first, to be measured"
    )(command)


def search_budget(command: Callable[..., Any]) -> Any:
    """Add ``--seconds``, ``--steps``, ``--seed`` and ``--jobs``; the command gets them as ``budget``."""

    @wraps(command)
    def joined(*args: Any, **words: Any) -> Any:
        budget = Budget(*(words.pop(key) for key in ("seconds", "steps", "seed", "jobs")))
        return command(*args, budget=budget, **words)

    return _with_options(
        joined,
        click.option("--jobs", type=click.IntRange(1, 64), default=1, show_default=True, help="processes"),
        click.option("--seed", type=click.IntRange(0), default=1, show_default=True, help="start of the random search"),
        click.option("--steps", type=click.IntRange(1), help="a budget that does not depend on the clock"),
        click.option("--seconds", type=click.FloatRange(0, min_open=True), default=30.0, show_default=True,
                     help="search budget, wall time"),
    )  # fmt: skip


def _with_options(command: Callable[..., Any], *options: Callable[[Any], Any]) -> Any:
    """Decorate a command; click's options keep its type, which mypy cannot see through `wraps`."""
    for option in options:
        command = option(command)
    return command


def other_forms(command: Command) -> Command:
    """Add ``--also``; the command gets ``also``, a tuple of `Form`."""
    return click.option(
        "--also",
        multiple=True,
        type=click.Choice([str(form) for form in Form]),
        callback=lambda _ctx, _param, words: tuple(Form(word) for word in words),
        help="write each sheet also as contours alone, as R12, with the kerf allowed for, or one cut for two parts",
    )(command)


def parse_roles(layers: tuple[str, ...]) -> dict[str, Role]:
    """Read ``NAME=ROLE`` words.

    Raises
    ------
    UsageError
        When a word has another form.
    """
    out = {}
    for word in layers:
        name, sign, role = word.rpartition("=")
        if not sign or role not in set(Role):
            raise UsageError(
                f"--layer {word!r} is not understood", "write NAME=cut, NAME=mark, NAME=bend or NAME=ignore"
            )
        out[name] = Role(role)
    return out
