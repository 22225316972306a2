"""The root of the command line: commands are imported when they run; errors become two lines and a status."""

import importlib
import logging
import os
import signal
import sys
from typing import NoReturn

import click

from flatprep import __version__
from flatprep.base.errors import ExitStatus, FlatprepError
from flatprep.cli import talk
from flatprep.cli.interrupt import answer_interruptions, ended_by, status_of

_COMMANDS = {
    "alternatives": "what else parts could be made of: thickness, mass, cost, and whether it can be cut",
    "book": "book the sheets of a layout as cut: counts and remnants out of the rack, offcuts into it",
    "checklist": "the bench work per part: drill, ream, countersink, tap, bend, deburr, in order",
    "compare": "what changed between two revisions of a drawing",
    "coupon": "draw sample cuts of a job's slots and bores, to be tried first",
    "draft": "write a job file from a folder of drawings",
    "estimate": "mass, cut length, pierces and material cost",
    "lint": "check drawings against material, thickness and process",
    "lookup": "ask the hardware and material tables",
    "nest": "lay a job's parts on its stock",
    "prepare": "everything into one folder, with report.html",
    "repair": "write a clean drawing out of an untidy one",
    "rules": "list the rules, and the limits in force",
}


class Root(click.Group):
    """Finds commands by module name, so that `--help` loads none of them."""

    def list_commands(self, ctx: click.Context) -> list[str]:
        """Names in alphabetical order."""
        return sorted(_COMMANDS)

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        """Import a command when it is run."""
        if cmd_name not in _COMMANDS:
            return None
        module = importlib.import_module(f"flatprep.cli.{cmd_name}")
        command: click.Command = module.command
        if not any(param.name == "quiet" for param in command.params):
            talk.add_to(command)
        return command

    def format_commands(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """List the commands without loading them."""
        with formatter.section("Commands"):
            formatter.write_dl(sorted(_COMMANDS.items()))

    def invoke(self, ctx: click.Context) -> object:
        """Run a command; an error of ours becomes its message, what to do, and its status."""
        ended_by()  # an interruption of an earlier run in this process is over
        try:
            return super().invoke(ctx)
        except FlatprepError as err:
            talk.say(f"error: {err.message}", err=True)
            if err.remedy:
                talk.say(f"  try: {err.remedy}", err=True)
            ctx.exit(err.exit_status)
        except KeyboardInterrupt:
            _end_stopped(ctx, ended_by() or signal.SIGINT)
        except (click.ClickException, click.exceptions.Exit, click.Abort, BrokenPipeError):
            raise
        except Exception as err:
            if number := ended_by():  # a library made another error of the interruption
                _end_stopped(ctx, number)
            if os.environ.get("FLATPREP_TRACEBACK"):
                raise
            talk.say(f"error: flatprep itself failed ({type(err).__name__}: {err})", err=True)
            talk.say("  try: set FLATPREP_TRACEBACK=1, run it again, and report what it prints", err=True)
            ctx.exit(ExitStatus.UNUSABLE)


def _end_stopped(ctx: click.Context, number: int) -> NoReturn:
    talk.say("stopped", err=True)
    ctx.exit(status_of(number))


@click.group(cls=Root, context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(__version__, prog_name="flatprep")
def root() -> None:
    """Check flat parts before they are cut, lay them on stock, and list the bench work, mass and cost.

    Ends with 0 when all is well, 1 when there is something to look at, 2 when the input cannot be used.
    """


def main() -> None:
    """Run flatprep."""
    answer_interruptions()
    # what it mends or cannot read is told by us, once a drawing and with its name
    logging.getLogger("ezdxf").setLevel(logging.CRITICAL)
    # the arithmetic is small: a thread pool in every process only costs time and memory
    for name in ("OPENBLAS_NUM_THREADS", "OMP_NUM_THREADS", "MKL_NUM_THREADS"):
        os.environ.setdefault(name, "1")
    try:
        root.main(prog_name="flatprep")
    except SystemExit:
        # CPython notes an interruption inside exec(), which dataclasses use, and would end by SIGINT whatever the
        # status; running exec() again clears the note
        exec("")
        raise
    except BrokenPipeError:
        # the reader of a pipe went away: `flatprep lint ... | head`
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        sys.exit(ExitStatus.CLEAN)
