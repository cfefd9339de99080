"""Compiled loops: arrays in, arrays out."""
