"""Run the command line with ``python -m flatprep``."""

from flatprep.cli.start import main

if __name__ == "__main__":
    main()
