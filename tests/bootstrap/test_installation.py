"""Installed with pip, the program is complete and runs from any folder; needs the package index."""

import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]


@pytest.mark.fresh_machine
def test_an_installation_has_all_it_needs(tmp_path: Path) -> None:
    """`pip install .` brings the command, the resources and the sample plants."""

    def run(*command: str) -> str:
        return subprocess.run(command, cwd=tmp_path, capture_output=True, text=True, check=True).stdout

    run(sys.executable, "-m", "venv", "environment")
    run("environment/bin/python", "-m", "pip", "install", str(ROOT))
    assert run("environment/bin/trimwright", "--version") == run("environment/bin/python", "-m", "tuner", "--version")
    find = "from tuner.places import resources, sample_plants as samples; print(resources(), samples() / 'heater.toml')"
    resources, sheet = (tmp_path / name for name in run("environment/bin/python", "-c", find).split())
    assert (resources.is_dir(), ROOT in resources.parents) == (True, False)
    assert "Met" in run("environment/bin/trimwright", "judge", str(sheet))
