"""What can go wrong is said in sentences, word for word."""

import pytest

from tuner.errors import DeliveryError, Fault, FormulaError, LoopError, SheetError, TrimwrightError, nearest


@pytest.mark.parametrize(
    ("fault", "said"),
    [
        (Fault("trial.duration", "a number", "nothing"), "trial.duration: expected a number, found nothing"),
        (Fault("", "a file", "a folder"), "expected a file, found a folder"),
        (Fault("a.kpp", "a key", "none", "kp"), "a.kpp: expected a key, found none; the nearest valid name is kp"),
        (Fault("plant.expression", "')'", "'&'", position=5), "plant.expression, character 6: expected ')', found '&'"),
    ],
)
def test_a_fault_is_one_sentence(fault: Fault, said: str) -> None:
    """The sentence says where, what was expected, what was found, and the nearest name when there is one."""
    assert str(fault) == said


def test_a_sheet_error_holds_every_fault() -> None:
    """Each fault gets its line, with the file before it."""
    faults = [Fault("a", "1", "2"), Fault("b", "3", "4")]
    error = SheetError(faults, "loop.toml")
    assert str(error) == "loop.toml: a: expected 1, found 2\nloop.toml: b: expected 3, found 4"
    assert error.faults == tuple(faults)
    assert SheetError(faults).sentences() == ["a: expected 1, found 2", "b: expected 3, found 4"]


def test_a_formula_error_counts_characters_from_one() -> None:
    """People count from one, the index from zero."""
    error = FormulaError("s &", 2, "an operator", "'&'")
    assert str(error) == "expected an operator at character 3, found '&'"
    assert (error.text, error.position) == ("s &", 2)


@pytest.mark.parametrize("error", [SheetError([]), FormulaError("", 0, "", ""), LoopError(), DeliveryError()])
def test_every_error_is_of_the_family(error: Exception) -> None:
    """One except clause catches all that the program refuses."""
    assert isinstance(error, TrimwrightError)


@pytest.mark.parametrize(
    ("name", "near"), [("overshot", "overshoot"), ("Damping", "damping"), ("xyz", ""), ("", ""), ("damping", "damping")]
)
def test_the_nearest_name_is_near(name: str, near: str) -> None:
    """A misspelt name gets the one it resembles, another name none."""
    assert nearest(name, ["overshoot", "damping", "settling_time"]) == near
