"""A clean drawing out of an untidy one, with a list of what was changed."""
