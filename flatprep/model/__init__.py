"""The values that travel between packages: frozen, without behaviour that needs a file or a profile."""
