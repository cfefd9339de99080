"""The road of an assessment for whole rulers and maps: what the loop would be at every notch."""
