"""The control law, written once as a plain function, and its translation to other languages."""
