"""Verdicts are told apart by shape alone: without any colour their signs differ."""

from itertools import combinations
from typing import get_args

import pytest
from PySide6.QtCore import QRectF
from PySide6.QtGui import QColor, QImage, QPainter
from PySide6.QtWidgets import QApplication

from tuner.window.signs import Sign, draw_sign


def _drawn(sign: Sign) -> QImage:
    image = QImage(24, 24, QImage.Format.Format_RGB32)
    image.fill(QColor("white"))
    painter = QPainter(image)
    draw_sign(painter, sign, QRectF(2.0, 2.0, 20.0, 20.0), QColor("black"))
    painter.end()
    return image


@pytest.mark.parametrize(("one", "other"), list(combinations(get_args(Sign), 2)))
def test_signs_differ_in_black_and_white(qapp: QApplication, one: Sign, other: Sign) -> None:
    """At least a tenth of the pixels of two signs differ clearly."""
    del qapp
    first, second = _drawn(one), _drawn(other)
    pairs = [(first.pixelColor(x, y).value(), second.pixelColor(x, y).value()) for x in range(24) for y in range(24)]
    assert sum(abs(a - b) > 100 for a, b in pairs) > 57
