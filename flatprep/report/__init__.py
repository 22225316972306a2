"""Documents out of values: text, JSON, CSV, SVG, HTML."""
