"""Undo and redo over frozen states."""

from dataclasses import dataclass, replace
from typing import Generic, TypeVar

State = TypeVar("State")

DEPTH = 1000
"""Steps that can be undone; older ones are forgotten."""


@dataclass(frozen=True, slots=True)
class Step(Generic[State]):
    """One change: what it was called, and the state on its far side (before it in the past, after it in the future)."""

    label: str
    state: State


@dataclass(frozen=True, slots=True)
class History(Generic[State]):
    """A present with its past and its future.

    Parameters
    ----------
    present : State
        What is shown.
    past, future : tuple of Step
        Nearest last.
    open_key : str or None
        While a key is open, changes under the same key merge into the last step: one drag, one step.
    """

    present: State
    past: tuple[Step[State], ...] = ()
    future: tuple[Step[State], ...] = ()
    open_key: str | None = None

    def changed(self, state: State, label: str, merge_key: str | None = None) -> "History[State]":
        """Return the history with a new present; the future is gone. Nothing happens when the state is the same."""
        if state == self.present:
            return self
        if merge_key is not None and merge_key == self.open_key:
            return replace(self, present=state)
        past = (*self.released().past, Step(label, self.present))[-DEPTH:]
        return History(state, past, (), merge_key)

    def released(self) -> "History[State]":
        """Return the history with the merging ended; a drag that came back to where it began leaves no step."""
        if self.open_key is None:
            return self
        if self.past and self.past[-1].state == self.present:
            return History(self.present, self.past[:-1], self.future)
        return replace(self, open_key=None)

    def undone(self) -> "History[State]":
        """Return the history one step back; the same when there is none."""
        calm = self.released()
        if not calm.past:
            return calm
        *past, step = calm.past
        return History(step.state, tuple(past), (*calm.future, Step(step.label, calm.present)))

    def redone(self) -> "History[State]":
        """Return the history one step forward; the same when there is none."""
        calm = self.released()
        if not calm.future:
            return calm
        *future, step = calm.future
        return History(step.state, (*calm.past, Step(step.label, calm.present)), tuple(future))
