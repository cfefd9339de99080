"""A demonstration as data."""

from tuner.model.demonstration import Action, Demonstration, Stop


def test_it_lasts_until_its_last_action() -> None:
    """The time of the last action; nothing without one."""
    assert Demonstration("Show", "a.toml", (Action(1.0, None, "Look."), Action(5.0, Stop()))).duration == 5.0
    assert Demonstration("Show", "a.toml", ()).duration == 0.0
