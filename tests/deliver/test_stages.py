"""The filters of the delivered files: which there are, and that their text is that of the law's room."""

from collections.abc import Iterator, Mapping, Sequence

from tests.deliver.samples import BARE, DYNAMIC, FULL, specification
from tuner.deliver.stages import body, stages, start
from tuner.law import print_python
from tuner.law.feedforward import scaled, section
from tuner.law.translate import Statement


class Plain:
    """Writes a stage as plain Python, its memories as names."""

    number = staticmethod(repr)
    memory = staticmethod(str)

    def note(self, text: str) -> str:
        """Return a comment."""
        return f"# {text}"

    def block(self, nodes: Sequence[Statement], names: Mapping[str, str]) -> Iterator[str]:
        """Yield the lines of statements."""
        yield from print_python.statements(nodes, names, "")

    def assigned(self, name: str, value: str) -> str:
        """Return an assignment."""
        return f"{name} = {value}"


def test_which_filters_there_are() -> None:
    """In the order in which they are taken; none for a controller without feedforward and filter."""
    assert stages(specification(BARE)) == ()
    assert [stage.name for stage in stages(specification(FULL))] == ["forward"]
    found = stages(specification(DYNAMIC))
    assert [stage.name for stage in found] == ["forward", "against", "asked_for"]
    assert [stage.given for stage in found] == ["reference", "disturbance", "reference"]


def test_memories_are_two_for_each_section() -> None:
    """They are named after the filter."""
    *_, asked = stages(specification(DYNAMIC))
    assert len(asked.digital.sections) == 3
    assert asked.memories[:3] == ("asked_for_1_1", "asked_for_1_2", "asked_for_2_1")


def test_the_text_computes_what_the_functions_do() -> None:
    """Run line by line it gives the bits of `scaled` and `section`, one section after the other."""
    stage = stages(specification(DYNAMIC))[0]
    space: dict[str, float] = dict.fromkeys(stage.memories, 0.0)
    space |= {"given": 75.5, "resting_measurement": 72.0}
    lines = [f"value = {start(stage, Plain(), 'given')}", *body(stage, Plain())]
    memories = [(0.0, 0.0)] * len(stage.digital.sections)
    for _ in range(4):
        exec("\n".join(lines), space)  # noqa: S102 - our own text
        expected = scaled(75.5, 72.0, stage.digital.gain)
        for place, constants in enumerate(stage.digital.sections):
            expected, *kept = section(expected, *memories[place], *constants)
            memories[place] = (kept[0], kept[1])
        assert space["value"] == expected
