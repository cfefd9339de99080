"""Measures and limits make a verdict, and the overlays that the plots draw, as plain numbers."""
