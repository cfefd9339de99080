"""The open document, without Qt: its history, its file, what was typed, and the tunings kept to compare with."""
