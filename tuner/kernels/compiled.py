"""The one door to numba: a typed decorator, and a cache that notices when the control law changes."""

import os
import zlib
from collections.abc import Callable
from functools import cache
from pathlib import Path
from typing import TypeVar, cast

from tuner.places import keep_compiled_kernels

Function = TypeVar("Function", bound=Callable[..., object])

_PACKAGE = Path(__file__).resolve().parent.parent


def compiled(function: Function) -> Function:
    """Compile a function of numbers and arrays at its first call, and keep the result for the next start.

    Arithmetic is that of IEEE 754 in the order written: no fast arithmetic, no contraction. The lock of the
    interpreter is let go while it runs. ``function.py_func`` is the plain function.
    """
    return _compiled(function, EXACT)


def compiled_lanes(function: Function) -> Function:
    """Compile a function whose inner loops run along lanes, with arithmetic that lets them share instructions.

    Products and sums may be contracted, and no number is taken to be infinite or none: what is computed agrees with
    `compiled` to rounding, and only there where every number is finite.
    """
    return _compiled(function, ALONG_LANES)


EXACT: frozenset[str] = frozenset()
ALONG_LANES = frozenset({"contract", "nsz", "nnan", "ninf"})
"""Freedoms of the compiler's arithmetic; none of them lets sums be taken in another order."""


def _compiled(function: Function, freedoms: frozenset[str]) -> Function:
    """Compile with some freedoms, and keep the result in their own folder: the key of numba is the same for all."""
    keep_compiled_kernels()
    import numba
    from numba.core import config

    _use_wide_registers()
    folder = "-".join((_stamp_of_this_run(), *sorted(freedoms)))
    vars(config)["CACHE_DIR"] = str(Path(os.environ["NUMBA_CACHE_DIR"]) / folder)
    decorator = numba.njit(cache=True, nogil=True, fastmath=set(freedoms) or False, error_model="numpy")
    return cast(Function, cast(Callable[[Callable[..., object]], object], decorator)(function))


@cache
def _use_wide_registers() -> None:
    """Let loops use registers of 512 bits, which saves a fifth of their time.

    A compiler keeps to half of that unless told, since the first processors that had them ran slower meanwhile. Those
    that can also do what is asked here came later and do not. What is computed stays the same to the bit.
    """
    from numba.core import codegen, config

    features = cast(Callable[[], str], codegen.get_host_cpu_features)()
    if vars(config)["CPU_FEATURES"] is None and "+avx512vbmi2" in features.split(","):
        vars(config)["CPU_FEATURES"] = f"{features},-prefer-256-bit"


@cache
def _stamp_of_this_run() -> str:
    return _stamp()


def _stamp() -> str:
    """Return a digest of the law and the kernels, for numba only looks at the one file that holds a function."""
    sources = sorted((*_PACKAGE.glob("law/*.py"), *_PACKAGE.glob("kernels/*.py")))
    return f"{zlib.crc32(b''.join(source.read_bytes() for source in sources)):08x}"
