"""The command line: one module a command, the only place that prints and that knows click."""
