"""What README shows is what the tool prints: its commands are run and their output compared."""

import re
import shutil
import subprocess
import sys
from pathlib import Path

import pytest
from click.testing import CliRunner

from verifier.cli import main

ROOT = Path(__file__).resolve().parents[2]
TEXT = (ROOT / "README.md").read_text()
SHOWN = [  # an indented command with what is printed below it
    (command, re.sub(r"(?m)^    ", "", shown))
    for command, shown in re.findall(r"(?m)^    \$ (.+)\n((?:    (?!\$).*\n)+)", TEXT)
]


@pytest.fixture(scope="module")
def workplace(tmp_path_factory):
    folder = tmp_path_factory.mktemp("readme")
    shutil.copytree(ROOT / "cases", folder / "cases")
    return folder


def test_readme_shows_something():
    assert len(SHOWN) >= 4


@pytest.mark.parametrize(("command", "shown"), SHOWN, ids=[command for command, _ in SHOWN])
def test_the_output_is_real(command, shown, workplace, monkeypatch):
    monkeypatch.chdir(workplace)
    if not (workplace / "results" / "paley").exists():
        CliRunner().invoke(main, ["check", "cases/paley.toml"])
    scripts = Path(sys.executable).parent
    done = subprocess.run(
        command, shell=True, capture_output=True, text=True, check=False,
        env={"PATH": f"{scripts}:/usr/bin:/bin"},
    )  # fmt: skip
    assert done.stdout == shown


def test_the_case_in_readme_runs(workplace):
    [case] = re.findall(r"```toml\n(.*?)```", TEXT, re.DOTALL)
    (workplace / "odd-cubic.toml").write_text(case)
    out = str(workplace / "odd-cubic")
    run = CliRunner().invoke(main, ["check", str(workplace / "odd-cubic.toml"), "--out", out])
    assert run.exit_code == 0, run.output
    assert "complete-sum  holds" in run.output
