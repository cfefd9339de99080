"""Answers as views are shown them, made of an assessment."""

from tuner.judge.assessment import Assessment
from tuner.judge.overlay import overlay
from tuner.model.sheet import Sheet
from tuner.window.shown import Shown


def shown_of(sheet: Sheet, assessment: Assessment) -> Shown:
    """Return the answer that holds an assessment of a whole family."""
    return Shown(1, sheet, assessment, overlay(sheet, assessment))
