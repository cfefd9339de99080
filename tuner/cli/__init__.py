"""Commands, what they print, and exit status."""
