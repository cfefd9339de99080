"""The law printed as Python."""

import random

from tuner.law import pid, print_python
from tuner.law.constants import bake, notch
from tuner.law.translate import parse, read


def test_statements_keep_order_notes_and_parentheses() -> None:
    """The text is the same arithmetic in the same order, with the comments of the law."""
    source = (
        "def f(a, b):\n    # First.\n    a = a * b + 1.0\n    if a < b and b < 2.0:\n        a = b\n"
        "    else:\n        b = a\n    return a\n"
    )
    assert print_python.statements(parse(source).body, {"b": "B"}, "") == [
        "# First.",
        "a = (a * B) + 1.0",
        "if (",
        "    (a < B)",
        "    and (B < 2.0)",
        "):",
        "    a = B",
        "else:",
        "    B = a",
    ]


def test_printed_law_is_the_law() -> None:
    """Run as a text of its own, the printed law gives the same bits as the law, in every mode."""
    law = read(pid.law)
    lines = print_python.statements(law.body, {}, "    ")
    text = f"def printed({', '.join(law.arguments)}):\n" + "\n".join(lines) + f"\n    return ({', '.join(pid.STATE)})\n"
    space: dict[str, object] = {}
    exec(text, space)  # noqa: S102 - our own text
    printed = space["printed"]
    assert callable(printed)
    constants = bake(
        sample_time=0.5, kp=2.0, ki=0.1, kd=3.0, filter_time=0.2, windup_time=4.0, low=-5.0, high=6.0, rate=3.0,
        measurement_filter_time=1.0, notch_section=notch(0.5, 1.0, 0.2, 0.9), resting_measurement=1.0,
    )  # fmt: skip
    draw = random.Random(3)  # noqa: S311 - repeatable on purpose
    state: tuple[float, ...] = (0.0,) * len(pid.STATE)
    for k in range(2000):
        mode = float(k // 100 % 3) if k % 100 == 0 else state[7]
        given = (draw.gauss(1, 3), draw.gauss(1, 1), draw.gauss(0, 1), 1.0, *state[:7], mode, *state[8:], *constants)
        state = pid.law(*given)
        assert printed(*given) == state
