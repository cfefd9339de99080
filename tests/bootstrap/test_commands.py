"""`python3 tuner` and `python3 tests` on a fresh machine whose apt, venv and pip only write down their calls."""

import os
import signal
import subprocess
import time
import tomllib
from collections.abc import Callable
from pathlib import Path

import pytest

from tests.bootstrap.fake_machine import BASE_PYTHON, EVERYTHING, FakeMachine

BUSY = "E: Could not get lock /var/lib/dpkg/lock-frontend. It is held by process 77 (apt-get)"


def _requirements(machine: FakeMachine, testing: bool) -> list[str]:
    project = tomllib.loads((machine.checkout / "pyproject.toml").read_text())["project"]
    extra: list[str] = project["optional-dependencies"]["test"]
    needed: list[str] = project["dependencies"]
    return needed + extra if testing else needed


def _until(condition: Callable[[], object]) -> None:
    deadline = time.monotonic() + 60
    while not condition():
        assert time.monotonic() < deadline, "what the test waits for does not come"
        time.sleep(0.02)


def test_a_fresh_machine_gets_everything(machine: FakeMachine) -> None:
    """As root apt installs what is missing, pip what the project names; the program sees its arguments and folder."""
    outcome = machine.run("judge", "a sheet.toml", FAKE_MISSING=EVERYTHING)
    assert outcome.status == 7
    expected = {"argv": ["judge", "a sheet.toml"], "folder": str(machine.elsewhere), "prefix": str(machine.environment)}
    assert outcome.ran == expected
    update, install = machine.called("apt")
    assert update[-1] == "update"
    assert install[-6:] == ["install", "-y", "--no-install-recommends", "python3-venv", "libgl1", "libegl1"]
    (pip,) = machine.called("pip")
    assert pip[-len(_requirements(machine, testing=False)) :] == _requirements(machine, testing=False)


def test_the_second_run_makes_nothing(machine: FakeMachine) -> None:
    """Once complete, the environment is used as it is and nothing is said."""
    machine.run("judge")
    calls = machine.calls
    again = machine.run("judge")
    assert (again.status, again.err) == (7, "")
    assert machine.calls == [*calls, ["program", "judge"]]


def test_the_simulation_is_compiled_while_the_environment_is_made(machine: FakeMachine) -> None:
    """The built-in loop is judged once before the program starts, so that its first start is as quick as later ones."""
    machine.run("deliver")
    assert machine.called("program") == [["judge", f"{machine.checkout}/sample_plants/heater.toml"], ["deliver"]]


def test_the_tests_bring_their_own_tools(machine: FakeMachine) -> None:
    """The test command adds its packages to an environment that the program has made already."""
    machine.run("judge")
    outcome = machine.run("tests/model", program="tests", FAKE_MISSING="/usr/include/stdio.h")
    assert outcome.ran["argv"] == ["tests/model"]
    packages = ["xvfb", "xauth", "xdotool", "openbox", "imagemagick", "x11-utils", "gcc", "g++", "libc6-dev"]
    assert machine.called("apt")[-1][-9:] == packages
    assert machine.called("pip")[-1][-len(_requirements(machine, testing=True)) :] == _requirements(
        machine, testing=True
    )
    assert len(machine.called("venv")) == 1


def test_tools_of_the_tests_that_cannot_be_installed_do_not_stop_them(machine: FakeMachine) -> None:
    """Who may not install packages gets the line to have them installed, and the tests that need none."""
    outcome = machine.run(program="tests", FAKE_USER="1000")
    assert outcome.ran["argv"] == []
    assert (
        "Going on without Xvfb, xauth, xdotool, openbox, import, xwininfo, gcc, g++, which this run can do without."
        in outcome.err
    )
    assert (
        "\n  sudo apt-get install --no-install-recommends xvfb xauth xdotool openbox imagemagick x11-utils gcc g++\n"
        in outcome.err
    )


def test_without_the_right_to_install_the_line_is_printed(machine: FakeMachine) -> None:
    """Not root and no venv module: the exact line to run, status 2, and nothing half-made."""
    outcome = machine.run("judge", FAKE_USER="1000", FAKE_MISSING=EVERYTHING)
    assert outcome.status == 2
    assert "Missing on this machine: ensurepip, libGL.so.1, libEGL.so.1.\n" in outcome.err
    assert "\n  sudo apt-get install --no-install-recommends python3-venv libgl1 libegl1\n" in outcome.err
    assert machine.calls == []
    assert not machine.environment.exists()


def test_a_command_without_a_window_does_without_its_libraries(machine: FakeMachine) -> None:
    """Only Qt's libraries missing: a command goes on with a word, a window stops with the line, also later on."""
    lacking = {"FAKE_USER": "1000", "FAKE_MISSING": "libGL.so.1"}
    headless = machine.run("judge", **lacking)
    assert headless.status == 7
    assert "Going on without libGL.so.1, which" in headless.err
    assert machine.run("judge", **lacking).err == ""
    window = machine.run(DISPLAY=":0", **lacking)
    assert window.status == 2
    assert window.err.endswith(
        "then run the same command again:\n  sudo apt-get install --no-install-recommends libgl1\n"
    )
    assert machine.run(DISPLAY=":0", FAKE_USER="1000").status == 7
    assert len(machine.called("pip")) == 1


def test_without_apt_the_missing_things_are_named(machine: FakeMachine) -> None:
    """On a system without apt the sentence names what is missing and leaves the how to its owner."""
    (machine.tools / "bin" / "apt-get").unlink()
    outcome = machine.run("judge", FAKE_MISSING="ensurepip")
    assert outcome.status == 2
    assert outcome.err.endswith(
        "Missing on this machine: ensurepip.\n"
        "Install them with the package manager of this system, then run the same command again.\n"
    )


@pytest.mark.parametrize(
    ("says", "sentence"),
    [
        (BUSY, "another program is installing packages; wait for it and run the same command again."),
        ("Err:1 Temporary failure resolving 'a.b'", "the package server cannot be reached; is this machine online?"),
        ("E: Unable to locate package python3-venv", "E: Unable to locate package python3-venv"),
    ],
    ids=["locked", "offline", "unknown"],
)
def test_a_failing_apt_is_explained(machine: FakeMachine, says: str, sentence: str) -> None:
    """A locked package system, no network and anything else each give a sentence, and the log is named."""
    outcome = machine.run("judge", FAKE_MISSING="ensurepip", FAKE_APT_SAYS=says, FAKE_APT_STATUS="100")
    assert outcome.status == 2
    assert (
        f"apt-get could not install them: {sentence} The whole output is in {machine.environment}.log.\n" in outcome.err
    )
    assert says in (machine.checkout / ".venv.log").read_text()


def test_an_interrupted_installation_is_completed(machine: FakeMachine) -> None:
    """When Ctrl-C has cut apt off half-way, the next run lets dpkg end that first and mends what is broken."""
    interrupted = "E: dpkg was interrupted, you must manually run 'dpkg --configure -a' to correct the problem."
    machine.add_command("dpkg", 'echo "$@" > "$FAKE/dpkg"')
    machine.add_command(
        "apt-get",
        f'"{BASE_PYTHON}" -m apt "$@"\ncase "$*" in *" install "*) ;; *) exit 0;; esac\n'
        f'[ -e "$FAKE/dpkg" ] || {{ echo "{interrupted}"; exit 100; }}\n: > "$FAKE/installed"',
    )
    outcome = machine.run("judge", FAKE_MISSING="ensurepip")
    assert outcome.status == 7
    assert (machine.tools / "dpkg").read_text() == "--configure -a\n"
    _, cut_off, mended = machine.called("apt")
    assert mended == [*cut_off, "--fix-broken"]


def test_packages_that_do_not_help_are_told(machine: FakeMachine) -> None:
    """A Python of another origin does not find what the system's packages bring, which is said instead of repeated."""
    machine.add_command("apt-get")
    outcome = machine.run("judge", FAKE_MISSING="ensurepip")
    assert outcome.status == 2
    assert outcome.err.endswith(
        "Missing on this machine: ensurepip.\n"
        f"apt-get has installed the packages, but {BASE_PYTHON} does not find what is in them.\n"
    )


def test_a_failing_pip_is_explained_and_tried_again(machine: FakeMachine) -> None:
    """Offline, the sentence says so; the next run starts anew and succeeds."""
    failed = machine.run("judge", FAKE_PIP_SAYS="NewConnectionError: no route", FAKE_PIP_STATUS="1")
    assert failed.status == 2
    assert failed.err.splitlines()[-1] == (
        "pip could not install the Python packages: the package server cannot be reached; is this machine online? "
        f"The log is {machine.environment}.log."
    )
    assert machine.run("judge").status == 7


def test_an_interrupted_environment_is_made_anew(machine: FakeMachine) -> None:
    """Killed while pip runs: the next run removes what there is and makes the environment again."""
    with machine.start("judge", FAKE_PIP_SECONDS="60") as process:
        _until(lambda: machine.called("pip"))
        os.killpg(process.pid, signal.SIGKILL)
        process.communicate()
    (machine.environment / "left over").touch()
    outcome = machine.run("judge")
    assert outcome.status == 7
    assert "An environment that was not completed is removed." in outcome.err
    assert not (machine.environment / "left over").exists()
    assert len(machine.called("venv")) == 2


def test_ctrl_c_says_what_happens_next(machine: FakeMachine) -> None:
    """Interrupted from the keyboard: one sentence, the status of an interrupt, no traceback."""
    with machine.start("judge", FAKE_PIP_SECONDS="60") as process:
        _until(lambda: machine.called("pip"))
        os.killpg(process.pid, signal.SIGINT)
        _, err = process.communicate()
    assert process.returncode == 130
    assert err.endswith("\nStopped; the next run completes the environment.\n")
    assert "Traceback" not in err


def test_two_runs_at_once_make_one_environment(machine: FakeMachine) -> None:
    """The second run waits for the first and uses what it has made."""
    with machine.start("judge", FAKE_PIP_SECONDS="1") as first:
        _until(lambda: machine.called("pip"))
        second = machine.run("deliver")
        first.communicate()
    assert (first.returncode, second.status) == (7, 7)
    assert "Another run is making the environment; waiting for it." in second.err
    assert len(machine.called("venv")) == len(machine.called("pip")) == 1


def test_a_pip_that_outlives_its_run_is_waited_for(machine: FakeMachine) -> None:
    """Killing the run alone leaves pip at work in the folder: the next run waits for it before it starts anew."""
    with machine.start("judge", FAKE_PIP_SECONDS="1.5") as process:
        _until(lambda: machine.called("pip"))
        os.kill(process.pid, signal.SIGKILL)
        process.wait()
        second = machine.run("judge")
    assert second.status == 7
    assert "waiting for it." in second.err
    assert len(machine.called("venv")) == 2


def test_changed_requirements_are_installed_in_place(machine: FakeMachine) -> None:
    """A new requirement runs pip again in the same environment; without a network the old one stays complete."""
    machine.run("judge")
    project = machine.checkout / "pyproject.toml"
    before = project.read_text()
    project.write_text(before.replace('"lark', '"another>=1",\n    "lark'))
    assert machine.run("judge", FAKE_PIP_STATUS="1").status == 2
    project.write_text(before)
    assert machine.run("judge").err == ""
    project.write_text(before.replace('"lark', '"another>=1",\n    "lark'))
    assert machine.run("judge").status == 7
    assert "another>=1" in machine.called("pip")[-1]
    assert len(machine.called("venv")) == 1


def test_a_change_elsewhere_in_the_project_file_makes_nothing(machine: FakeMachine) -> None:
    """Only the requirements count, not the rest of the file they stand in."""
    machine.run("judge")
    project = machine.checkout / "pyproject.toml"
    project.write_text(project.read_text() + "\n# a remark\n")
    assert machine.run("judge").err == ""


def test_an_environment_made_by_hand_is_completed(machine: FakeMachine) -> None:
    """A person's own `.venv` is added to, not thrown away."""
    (machine.environment / "bin").mkdir(parents=True)
    (machine.environment / "bin" / "python").symlink_to(BASE_PYTHON)
    (machine.environment / "pyvenv.cfg").write_text(f"home = {Path(BASE_PYTHON).parent}\n")
    (machine.environment / "kept").touch()
    outcome = machine.run("judge", FAKE_USER="1000", FAKE_MISSING="ensurepip")
    assert outcome.status == 7
    assert (machine.environment / "kept").exists()
    assert machine.called("venv") == []


def test_a_folder_that_only_looks_like_an_environment_is_made_anew(machine: FakeMachine) -> None:
    """A Python in it that is really the system's is never installed into, and never handed over to again and again."""
    machine.run("judge")
    (machine.environment / "pyvenv.cfg").unlink()
    outcome = machine.run("judge")
    assert outcome.status == 2
    assert outcome.err == f"{machine.environment} is no whole environment; remove it and run the same command again.\n"
    (machine.environment / "trimwright-state.txt").unlink()
    assert machine.run("judge").status == 7
    assert len(machine.called("venv")) == 2


def test_an_environment_whose_python_is_gone_is_made_anew(machine: FakeMachine) -> None:
    """After the system's Python has moved on, the environment is made again for the new one."""
    machine.run("judge")
    (machine.environment / "bin" / "python").unlink()
    (machine.environment / "bin" / "python").symlink_to(machine.elsewhere / "python3.10")
    assert machine.run("judge").status == 7
    assert len(machine.called("venv")) == 2


def test_a_read_only_checkout_has_its_environment_in_the_cache(machine: FakeMachine) -> None:
    """Where the checkout cannot be written to, the environment lies in the user's cache, and is found there again."""
    read_only = {"FAKE_READ_ONLY": str(machine.checkout)}
    outcome = machine.run("judge", **read_only)
    assert str(outcome.ran["prefix"]).startswith(f"{machine.cache}/trimwright/environments/a bare checkout-")
    assert machine.run("judge", **read_only).err == ""
    assert sorted(path.name for path in machine.checkout.iterdir()) == ["pyproject.toml", "tests", "tuner"]


@pytest.mark.parametrize("program", ["tuner", "tests"])
def test_an_old_python_is_told_in_one_sentence(machine: FakeMachine, program: str) -> None:
    """Before 3.11 nothing is tried; the sentence says what is needed and what was found."""
    outcome = machine.run("judge", program=program, FAKE_VERSION="3.9.2")
    assert outcome.status == 2
    assert len(outcome.err.splitlines()) == 1
    assert "Python 3.11 or newer; " in outcome.err
    assert outcome.err.endswith(" is Python 3.9.2.\n")


def test_a_program_that_is_installed_makes_no_environment(machine: FakeMachine) -> None:
    """Without a project file beside the package there is nothing to make: it runs where it is."""
    (machine.checkout / "pyproject.toml").unlink()
    assert machine.run("judge").status == 7
    assert machine.calls == [["program", "judge"]]
    command = [BASE_PYTHON, "-m", "tuner", "judge"]
    as_module = subprocess.run(
        command, cwd=machine.checkout, env={"FAKE": str(machine.tools)}, capture_output=True, text=True, check=False
    )
    assert (as_module.returncode, as_module.stderr) == (7, "")
