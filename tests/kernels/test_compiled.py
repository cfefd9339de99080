"""The door to numba: what comes through it computes the same as plain Python, and the cache knows the law."""

import os
from collections.abc import Callable
from pathlib import Path
from typing import cast

import numpy as np
import pytest

from tuner.kernels import compiled as door
from tuner.kernels.compiled import compiled, compiled_lanes


@compiled
def _ratio(over: float, under: float) -> float:
    return over / under


def test_a_compiled_function_keeps_its_plain_self() -> None:
    """The plain function is at hand, and gives the same number."""
    plain = _ratio.py_func  # type: ignore[attr-defined]  # given by numba
    assert _ratio(1.0, 3.0) == plain(1.0, 3.0) == 1.0 / 3.0


def test_division_by_zero_gives_infinity() -> None:
    """As arrays do, a compiled division by zero gives infinity and raises nothing."""
    assert _ratio(1.0, 0.0) == np.inf


def test_exact_code_is_never_that_of_the_lanes() -> None:
    """One function compiled with and without freedoms is kept in two places, so that neither is taken for the other."""

    def product(one: float, other: float) -> float:
        return one * other + 1.0

    exact, free, again = compiled(product), compiled_lanes(product), compiled(product)
    kept = [function._cache.cache_path for function in (exact, free, again)]  # type: ignore[attr-defined]  # numba's
    assert kept[0] == kept[2] != kept[1]


def test_registers_are_as_wide_as_is_good() -> None:
    """The whole width is used where a processor has it and does not pay for it; elsewhere its own preference stays."""
    from numba.core import codegen, config

    own = cast(Callable[[], str], codegen.get_host_cpu_features)().split(",")
    set_to = vars(config)["CPU_FEATURES"]
    assert (set_to is not None) == ("+avx512vbmi2" in own or "NUMBA_CPU_FEATURES" in os.environ)
    if set_to is not None and "NUMBA_CPU_FEATURES" not in os.environ:
        assert set_to.split(",") == [*own, "-prefer-256-bit"]


def test_the_cache_notices_a_changed_law(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A changed text of the law leads to another folder of compiled code, the same text to the same one."""
    for room in ("law", "kernels"):
        (tmp_path / room).mkdir()
    law = tmp_path / "law" / "pid.py"
    law.write_text("u = 1")
    monkeypatch.setattr(door, "_PACKAGE", tmp_path)
    before = door._stamp()
    assert door._stamp() == before
    law.write_text("u = 2")
    assert door._stamp() != before
