"""What is measured on a part, each quantity once: webs, slots, corners, holes."""
