"""What a tuning sheet's file would be refused for, asked before a change is made."""

from tuner.errors import Fault, SheetError
from tuner.model.sheet import Sheet


def faults_of(sheet: Sheet) -> tuple[Fault, ...]:
    """Return the faults for which the file of a sheet would be refused; the reader of files decides."""
    from tuner.files.sheet import parse, render

    try:
        parse(render(sheet))
    except SheetError as refusal:
        return refusal.faults
    return ()


def refuse_new_faults(before: Sheet, after: Sheet) -> None:
    """Refuse a change that brings a fault; faults that were there before are not held against it.

    Raises
    ------
    SheetError
        With the new faults.
    """
    faults = faults_of(after)
    if not faults:
        return
    known = {fault.key for fault in faults_of(before)}
    new = [fault for fault in faults if fault.key not in known]
    if new:
        raise SheetError(new)


def sentence(refusal: Exception, path: str = "") -> str:
    """Return the words of a refusal, without the path of the key or table they stand beside."""
    if not isinstance(refusal, SheetError):
        return str(refusal)
    return "\n".join(_beside(str(fault), path) for fault in refusal.faults)


def _beside(words: str, path: str) -> str:
    for ending in (": ", ", ", "."):
        words = words.removeprefix(f"{path}{ending}")
    return words
