"""controller.c and controller.h: clean under strict compilers, and the same bits as the law."""

import shutil
import subprocess
from dataclasses import replace
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings

from tests.deliver.samples import (
    BARE,
    DYNAMIC,
    FULL,
    OPEN,
    STRICT,
    clang,
    controllers,
    recording,
    run_c,
    specification,
    written,
)
from tuner.deliver.proof import call, compared
from tuner.deliver.targets import c_files
from tuner.model.sheet import Sheet

SELFTEST = "-DCONTROLLER_SELFTEST_MAIN"
SHEETS = [
    pytest.param(FULL, id="full"),
    pytest.param(BARE, id="bare"),
    pytest.param(OPEN, id="open"),
    pytest.param(DYNAMIC, id="dynamic"),
]

needs_gcc = pytest.mark.skipif(shutil.which("gcc") is None, reason="there is no gcc on this machine")
needs_clang = pytest.mark.skipif(clang() is None, reason="there is no clang on this machine")
needs_cppcheck = pytest.mark.skipif(shutil.which("cppcheck") is None, reason="there is no cppcheck on this machine")


def compiled(folder: Path, compiler: str, *flags: str) -> subprocess.CompletedProcess[str]:
    """Compile the self-test of the files in a folder."""
    return call([compiler, *flags, SELFTEST, folder / "controller.c", "-o", folder / "selftest"])


def passes(folder: Path) -> bool:
    """Run the self-test."""
    return call([folder / "selftest"]).returncode == 0


@needs_gcc
@pytest.mark.parametrize("sheet", SHEETS)
@pytest.mark.parametrize("level", ["-O0", "-O2", "-O3", "-Os"])
def test_gcc_has_nothing_to_say_under_strict_flags(tmp_path: Path, sheet: Sheet, level: str) -> None:
    """Every warning is an error, at each level, and the self-test passes."""
    written("c", tmp_path, specification(sheet))
    made = compiled(tmp_path, "gcc", *STRICT, level)
    assert (made.returncode, made.stderr) == (0, "")
    assert passes(tmp_path)


@needs_gcc
@pytest.mark.parametrize(
    "flags", [("-std=gnu11", "-O3", "-march=native"), ("-std=gnu17", "-O2", "-mfma"), ("-x", "c++")]
)
def test_fused_products_are_held_off(tmp_path: Path, flags: tuple[str, ...]) -> None:
    """Where gcc would fuse products into sums, and as C++, the files still warn of nothing and pass."""
    written("c", tmp_path, specification())
    made = compiled(tmp_path, "gcc", *flags, "-Wall", "-Wextra", "-Werror")
    if "-mfma" in flags and made.returncode != 0:
        pytest.skip("this machine's gcc has no fused products")
    assert (made.returncode, made.stderr) == (0, "")
    assert passes(tmp_path)


@needs_clang
@pytest.mark.parametrize("flags", [("-O0",), ("-O2",), ("-O3", "-march=native")])
def test_clang_has_nothing_to_say_under_strict_flags(tmp_path: Path, flags: tuple[str, ...]) -> None:
    """Clang fuses products by default even in C99: the guard in the file holds it off."""
    written("c", tmp_path, specification())
    made = compiled(tmp_path, clang() or "", *STRICT, *flags)
    assert (made.returncode, made.stderr) == (0, "")
    assert passes(tmp_path)


@needs_gcc
def test_sanitizers_find_nothing(tmp_path: Path) -> None:
    """No undefined behaviour, no stray access, no division by zero in the self-test."""
    written("c", tmp_path, specification())
    flags = ("-g", "-fsanitize=undefined,address,float-divide-by-zero", "-fno-sanitize-recover=all")
    made = compiled(tmp_path, "gcc", *STRICT, *flags)
    if made.returncode != 0:
        pytest.skip("this machine's gcc has no sanitizers")
    assert passes(tmp_path)


@needs_cppcheck
@pytest.mark.parametrize("sheet", SHEETS)
@pytest.mark.parametrize(
    "asked",
    [("--enable=warning,style,performance,portability", "--inconclusive"), ("--enable=style", "--addon=misra")],
    ids=["style", "misra"],
)
def test_cppcheck_finds_nothing(tmp_path: Path, sheet: Sheet, asked: tuple[str, ...]) -> None:
    """The static checker and its MISRA addon, a check of a subset of the rules, have no finding."""
    written("c", tmp_path, specification(sheet))
    found = call(["cppcheck", "-q", "--std=c99", *asked, "--error-exitcode=3", tmp_path / "controller.c"])
    assert (found.returncode, found.stdout + found.stderr) == (0, "")


@needs_gcc
@pytest.mark.parametrize("flags", [("-std=c99", "-O0"), ("-std=c99", "-O2"), ("-std=gnu11", "-O3", "-march=native")])
def test_hundred_thousand_samples_are_the_same_bits(tmp_path: Path, flags: tuple[str, ...]) -> None:
    """In closed loop with every kick, each effort and each flag of the compiled file is that of the law."""
    written("c", tmp_path, specification())
    proof = compared("controller.c", "", recording(), run_c(tmp_path, "gcc", flags, recording()))
    assert (proof.steps, proof.worst_difference, proof.proved) == (100_000, 0.0, True)


@needs_clang
def test_hundred_thousand_samples_are_the_same_bits_by_clang(tmp_path: Path) -> None:
    """The other compiler gives the same bits."""
    written("c", tmp_path, specification())
    flags = ("-std=c99", "-O2", "-march=native")
    assert compared("controller.c", "", recording(), run_c(tmp_path, clang() or "", flags, recording())).proved


@needs_gcc
@given(sheet=controllers())
@settings(max_examples=25, suppress_health_check=[HealthCheck.function_scoped_fixture])
def test_every_combination_is_the_same_bits(tmp_path: Path, sheet: Sheet) -> None:
    """Limits, rate, filters, notch, weights, forms, action, resting values, feedforward, feedback on or off."""
    written("c", tmp_path, specification(sheet))
    record = recording.__wrapped__(sheet, 3000)
    assert compared("controller.c", "", record, run_c(tmp_path, "gcc", (*STRICT, "-O1"), record)).proved


@needs_gcc
@pytest.mark.parametrize(
    ("right", "wrong"),
    [
        ("allowed < low", "allowed > low"),
        ("state->integral + (integral_gain", "state->integral - (integral_gain"),
        ("state->mode = 2.0", "state->mode = 0.0"),
        ("allowed = state->effort - rate_step", "allowed = state->effort"),
        ("state->fault = 1.0", "state->fault = 0.0"),
        ("(notch_a2 * found)", "(notch_a1 * found)"),
    ],
)
def test_a_spoilt_file_fails_its_self_test(tmp_path: Path, right: str, wrong: str) -> None:
    """The self-test can fail: each small change of the law is noticed."""
    source = written("c", tmp_path, specification()) / "controller.c"
    text = source.read_text(encoding="utf-8")
    assert right in text
    source.write_text(text.replace(right, wrong), encoding="utf-8")
    assert compiled(tmp_path, "gcc", "-std=c99").returncode == 0
    assert not passes(tmp_path)


@needs_gcc
@pytest.mark.parametrize(
    "title",
    [
        'He said "stop" */ int x; /* again',
        "/" + "*" * 3 + "/" + "/*/" * 2,
        "line one\nline two\r\n#error no",
        "ends in a backslash \\",
        "oven \N{FIRE} \u202e turned, 20 \N{DEGREE SIGN}C, \N{GREEK SMALL LETTER MU}, Öfen \ud800",
        "trigraph ??/ and $head ${head} %s {0}",
        "x" * 400,
    ],
)
def test_no_title_breaks_the_file(tmp_path: Path, title: str) -> None:
    """Whatever the loop and its signals are called, the comments stay comments and the file stays ASCII."""
    loop = replace(FULL.loop, title=title, controlled=replace(FULL.loop.controlled, name=title, unit=title))
    written("c", tmp_path, specification(replace(FULL, loop=loop)))
    assert (tmp_path / "controller.c").read_bytes().isascii()
    assert (tmp_path / "controller.h").read_bytes().isascii()
    assert compiled(tmp_path, "gcc", *STRICT).stderr == ""
    assert passes(tmp_path)


def test_without_a_compiler_the_proof_says_so(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Nothing is claimed that was not run."""
    monkeypatch.setattr(shutil, "which", lambda _: None)
    proofs = c_files.prove(tmp_path, tmp_path, specification(), recording(FULL, 100))
    assert [proof.entry() for proof in proofs] == [
        {
            "file": name,
            "how": "not run here, because no C compiler was found",
            "steps": 0,
            "worst_difference": None,
            "proved": False,
            "reason": "no C compiler was found",
        }
        for name in ("controller.c", "controller.h")
    ]


def test_a_compiler_that_does_not_work_is_no_compiler(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A compiler that cannot make a program is not held against the file."""
    monkeypatch.setattr(c_files, "_COMPILERS", ("false",))
    proofs = c_files.prove(tmp_path, tmp_path, specification(), recording(FULL, 100))
    assert {proof.reason for proof in proofs} == {"no C compiler works here"}
