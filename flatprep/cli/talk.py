"""How much a command says on stderr: ``--quiet`` only errors, ``--verbose`` also what is being done."""

from enum import IntEnum
from typing import Any

import click

from flatprep.base.names import printable

_KEY = "flatprep.talk"


class Talk(IntEnum):
    """How much is said."""

    QUIET = 0
    USUAL = 1
    VERBOSE = 2


def _set(ctx: click.Context, param: click.Parameter, value: bool) -> None:
    if value:
        ctx.meta[_KEY] = Talk.QUIET if param.name == "quiet" else Talk.VERBOSE


def add_to(command: click.Command) -> click.Command:
    """Give a command ``--quiet`` and ``--verbose``."""
    common: dict[str, Any] = {"is_flag": True, "expose_value": False, "callback": _set}
    command.params += [
        click.Option(["-q", "--quiet"], help="say nothing on stderr but errors", **common),
        click.Option(["-v", "--verbose"], help="say on stderr what is being done", **common),
    ]
    return command


def level() -> Talk:
    """Tell how much the running command is to say."""
    ctx = click.get_current_context(silent=True)
    return ctx.meta.get(_KEY, Talk.USUAL) if ctx else Talk.USUAL


def say(words: str, *, err: bool = False) -> None:
    """Print a text; what drawings and jobs bring along cannot drive the terminal."""
    click.echo(printable(words), err=err)


def warn(words: str) -> None:
    """Say a warning, unless the command is quiet."""
    if level() > Talk.QUIET:
        say(f"warning: {words}", err=True)


def note(words: str) -> None:
    """Say something worth knowing, unless the command is quiet."""
    if level() > Talk.QUIET:
        say(words, err=True)


def tell(words: str) -> None:
    """Say what is being done, if the command is verbose."""
    if level() is Talk.VERBOSE:
        say(words, err=True)
