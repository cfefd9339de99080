"""Text to model and back: plant formulas, tuning sheets, recorded data; every fault of a text is told at once."""
