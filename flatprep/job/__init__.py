"""Job file and cut list: TOML and CSV in, a checked Job out."""
