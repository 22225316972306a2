"""Hardware tables: threads, clearance holes, fits, heads, nuts, bearings, pins, tolerances, each read from its file."""
