"""Lay parts on stock."""
