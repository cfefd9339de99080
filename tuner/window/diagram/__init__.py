"""The loop drawn across the window: its blocks, its signals, and two switches."""
