"""The editors of the blocks of the loop, one at a time."""
