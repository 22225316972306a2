"""Run the command line with ``python -m flatprep``."""

from flatprep.cli.main import main

if __name__ == "__main__":
    main()
