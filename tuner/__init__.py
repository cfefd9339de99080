"""Trimwright: tune a feedback loop with its limits in sight and deliver a proved controller."""

__version__ = "0.1.0"
