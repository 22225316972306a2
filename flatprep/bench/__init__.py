"""The bench work of a part: steps and their order."""
