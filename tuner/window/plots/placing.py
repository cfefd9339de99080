"""Where words can stand without covering other words."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace


@dataclass(frozen=True, slots=True)
class Box:
    """A rectangle in pixels, y downwards."""

    left: float
    top: float
    right: float
    bottom: float

    @property
    def width(self) -> float:
        """Its width."""
        return self.right - self.left

    @property
    def height(self) -> float:
        """Its height."""
        return self.bottom - self.top

    def moved(self, x: float, y: float) -> "Box":
        """Return it moved."""
        return replace(self, left=self.left + x, right=self.right + x, top=self.top + y, bottom=self.bottom + y)

    def meets(self, other: "Box") -> bool:
        """Tell whether two boxes overlap."""
        across = self.left < other.right and other.left < self.right
        return across and self.top < other.bottom and other.top < self.bottom

    def holds(self, x: float, y: float) -> bool:
        """Tell whether a point lies inside."""
        return self.left <= x <= self.right and self.top <= y <= self.bottom

    def within(self, frame: "Box") -> "Box":
        """Return it moved as little as it takes to lie inside the frame; its left and top win when it is too large."""
        x = max(min(0.0, frame.right - self.right), frame.left - self.left)
        y = max(min(0.0, frame.bottom - self.bottom), frame.top - self.top)
        return self.moved(x, y)


def place_words(boxes: Sequence[Box], frame: Box) -> list[Box | None]:
    """Return where each box goes: inside the frame, moved up or down off those before it, None where there is no room.

    A box that lies wholly outside the frame names something that is not seen, and gets no place.
    """
    placed: list[Box | None] = []
    for box in boxes:
        taken = [other for other in placed if other is not None]
        placed.append(_free(box.within(frame), taken, frame) if _in_sight(box, frame) else None)
    return placed


def _in_sight(box: Box, frame: Box) -> bool:
    slack = 2.0 * box.height
    across = box.right > frame.left - slack and box.left < frame.right + slack
    return across and box.bottom > frame.top - slack and box.top < frame.bottom + slack


def _free(box: Box, taken: Iterable[Box], frame: Box) -> Box | None:
    others = list(taken)
    for steps in (0.0, -1.0, 1.0, -2.0, 2.0):
        candidate = box.moved(0.0, steps * box.height)
        inside = candidate.top >= frame.top and candidate.bottom <= frame.bottom
        if inside and not any(candidate.meets(other) for other in others):
            return candidate
    return None
