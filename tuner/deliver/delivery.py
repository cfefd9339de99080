"""The one door of this room: a judged sheet becomes a folder of proved files."""

import json
import tempfile
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from tuner.deliver.excitation import Recording, excite
from tuner.deliver.folder import filling, refuse_folder
from tuner.deliver.plant import nominal_plant
from tuner.deliver.proof import Proof
from tuner.deliver.refusals import refuse_controller, refuse_feeds, refuse_languages, refuse_verdict
from tuner.deliver.specification import Specification, specify
from tuner.deliver.target import Target
from tuner.deliver.targets import targets
from tuner.deliver.trial import trial
from tuner.judge.assessment import Assessment
from tuner.model.sheet import Sheet

STEPS = 50_000
"""Samples of the kicked closed loop that every file is compared over, beside the trial."""

_PROOF = "proof.json"


@dataclass(frozen=True, slots=True)
class Delivery:
    """What was handed over: the files, in the order written, and the proof of each."""

    files: tuple[Path, ...]
    proof: tuple[Proof, ...]


def deliver(  # noqa: PLR0913 - each is a decision of the person who delivers
    sheet: Sheet,
    assessment: Assessment,
    folder: Path | str,
    *,
    languages: Sequence[str] = ("json", "python", "c"),
    accept_unmet: bool = False,
    overwrite: bool = False,
    date: str = "",
) -> Delivery:
    """Write the controller files of a sheet into a folder, each proved against the simulation; all or nothing.

    Parameters
    ----------
    sheet, assessment
        The tuning sheet, and the assessment made of it.
    folder : Path or str
        Where the files go; made when it does not exist.
    languages : sequence of str
        Targets, by name.
    accept_unmet : bool
        Deliver although the verdict is not met; every file then says so at its top.
    overwrite : bool
        Let files of the same names be replaced.
    date : str
        Date to write into the files; they carry none otherwise, so that the same sheet gives the same files.

    Raises
    ------
    DeliveryError
        When the sheet cannot be delivered, a file does not answer as the simulation does, or the folder refuses;
        nothing is left behind and nothing is overwritten.
    """
    folder = Path(folder)
    known = targets()
    refuse_languages(languages, known)
    chosen = [known[language] for language in dict.fromkeys(languages)]
    refuse_controller(sheet.controller)
    refuse_verdict(sheet, assessment, accept_unmet=accept_unmet)
    names = [name for target in chosen for name in target.files]
    others = [name for target in known.values() for name in target.files if name not in names]
    refuse_folder(folder, [*names, _PROOF], others, overwrite=overwrite)

    specification = specify(sheet, assessment, date)
    refuse_feeds(specification.feeds)
    with filling(folder) as new:
        for target in chosen:
            _write(new, target, specification)
        proofs = _prove(new, chosen, specification)
        text = json.dumps([proof.entry() for proof in proofs], indent=1)
        (new / _PROOF).write_text(text + "\n", encoding="utf-8")
    return Delivery(tuple(folder / name for name in (*names, _PROOF)), proofs)


def _write(folder: Path, target: Target, specification: Specification) -> None:
    for name, text in target.write(specification).items():
        (folder / name).write_text(text, encoding="utf-8", newline="\n")


def _prove(folder: Path, chosen: Sequence[Target], specification: Specification) -> tuple[Proof, ...]:
    recording = _recorded(specification)
    with tempfile.TemporaryDirectory(prefix="trimwright-proof-") as work:
        proofs = [target.prove(folder, Path(work), specification, recording) for target in chosen]
    return tuple(proof for several in proofs for proof in several)


def _recorded(specification: Specification) -> Recording:
    return trial(specification).then(excite(specification, nominal_plant(specification.sheet), STEPS))
