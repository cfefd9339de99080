"""Units as people write them, made of those of one loop: no ones that say nothing, brackets where they are needed."""

from tuner.model.loop import Loop


def unit_in(template: str, loop: Loop) -> str:
    """Return a unit of the tables of parameters and measures in the units of a loop.

    Parameters
    ----------
    template : str
        ``{t}`` stands for the time unit, ``{y}`` for the unit of the controlled signal and ``{u}`` for that of the
        manipulated one, either of which may be empty: ``{u}/({y} {t})`` is then 1/s.
    """
    symbols = {"{t}": loop.time_unit, "{y}": loop.controlled.unit, "{u}": loop.manipulated.unit}
    over, _, under = template.partition("/")
    above = _filled(over.split(), symbols)
    below = _filled(under.strip("()").split(), symbols)
    if not below:
        return _product(above)
    divisor = _product(below)
    bare = not set(divisor) & {" ", "/"}
    return f"{_product(above) or '1'}/{divisor if bare else f'({divisor})'}"


def _filled(parts: list[str], symbols: dict[str, str]) -> list[str]:
    return [unit for part in parts if (unit := symbols.get(part, part))]


def _product(units: list[str]) -> str:
    """Return units side by side; among several, one that is itself a quotient stands in brackets."""
    if len(units) == 1:
        return units[0]
    return " ".join(f"({unit})" if "/" in unit else unit for unit in units)
