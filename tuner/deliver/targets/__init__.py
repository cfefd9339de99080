"""One module for each language of the delivery; each holds a `TARGET`, and being here is what registers it."""

from functools import cache
from importlib import import_module
from pkgutil import iter_modules

from tuner.deliver.target import Target


@cache
def targets() -> dict[str, Target]:
    """Return every target by its language, in the order of the modules' names."""
    names = sorted(module.name for module in iter_modules(__path__))
    found: list[Target] = [import_module(f"{__name__}.{name}").TARGET for name in names]
    return {target.language: target for target in found}
