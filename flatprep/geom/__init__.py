"""Arithmetic on bulge polylines: exact on lines and arcs; the polygon is made in one place only."""
