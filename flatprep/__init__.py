"""flatprep: checks, nests, prices and prepares flat parts for cutting and for the bench work after it."""

__version__ = "0.1.0"
