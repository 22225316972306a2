"""Tests of the verbs."""
