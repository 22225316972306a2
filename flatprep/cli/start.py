"""Where the program starts: an interruption while it is still loading ends it without a traceback."""

import signal


def main() -> None:
    """Load flatprep and run it."""
    signal.signal(signal.SIGINT, signal.SIG_DFL)
    from flatprep.cli.main import main as run

    run()
