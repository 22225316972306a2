"""The root of the command line: commands are imported when they run; errors become two lines and a status."""

import sys


def main() -> None:
    """Run flatprep."""
    sys.exit(2)
