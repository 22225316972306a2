"""Errors, units, tolerances and the progress protocol: what every other package may use."""
