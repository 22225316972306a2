"""Where the program starts: an interruption while it is still loading ends it without a traceback."""

import gc
import signal


def main() -> None:
    """Load flatprep and run it."""
    signal.signal(signal.SIGINT, signal.SIG_DFL)
    from flatprep.cli.main import main as run

    try:
        run()
    finally:
        gc.freeze()  # what is left goes with the process: looking for cycles in it would take a quarter of a second
