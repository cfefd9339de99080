"""The window: shows an assessment, and tells the document what the hand did. It computes nothing."""
