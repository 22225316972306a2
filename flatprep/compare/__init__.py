"""Two revisions of a part: what changed, and whether pieces already cut can be reworked."""
