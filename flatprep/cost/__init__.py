"""Mass, cut length and material cost."""
