"""Structures of control beside each other, and tunings beside each other, over the whole family."""
