"""The verbs of flatprep for Python callers: the only place that joins the other packages."""
