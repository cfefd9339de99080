"""The requirements of the project file."""

from pathlib import Path

from tuner.bootstrap.requirements import requirements

ROOT = Path(__file__).parents[2]


def test_the_tests_need_more_than_the_program() -> None:
    """The program's own requirements come first and are among those of its tests."""
    program, tests = requirements(ROOT, testing=False), requirements(ROOT, testing=True)
    assert tests[: len(program)] == program
    assert any(line.startswith("numba") for line in program)
    assert any(line.startswith("pytest") for line in tests[len(program) :])
