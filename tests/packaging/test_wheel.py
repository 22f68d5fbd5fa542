"""The wheel holds the package and the templates, and works from a zip file on the path."""

import subprocess
import sys
import zipfile
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]


@pytest.fixture(scope="module")
def wheel(tmp_path_factory):
    out = tmp_path_factory.mktemp("wheel")
    command = [
        sys.executable,
        "-m",
        "build",
        "--wheel",
        "--no-isolation",
        "--outdir",
        str(out),
        str(ROOT),
    ]
    done = subprocess.run(command, capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
    return next(out.glob("*.whl"))


def test_the_wheel_holds_what_it_should(wheel):
    with zipfile.ZipFile(wheel) as opened:
        held = {name for name in opened.namelist() if ".dist-info/" not in name}
    modules = {str(p.relative_to(ROOT)) for p in (ROOT / "verifier").rglob("*.py")}
    templates = {
        str(Path("verifier/_templates") / p.relative_to(ROOT / "templates"))
        for p in (ROOT / "templates").rglob("*")
        if p.is_file()
    }
    assert held == modules | templates | {"verifier/py.typed"}


def test_the_zipped_wheel_runs_the_main_job(wheel, tmp_path):
    code = (
        "import sys\n"
        f"sys.path.insert(0, {str(wheel)!r})\n"
        "import verifier\n"
        f"assert verifier.__file__.startswith({str(wheel)!r}), verifier.__file__\n"
        "from verifier.cli import main\n"
        f"main(['check', {str(ROOT / 'cases' / 'paley.toml')!r}, '--out', 'out', '--jobs', '1'])\n"
    )
    done = subprocess.run(
        [sys.executable, "-c", code], cwd=tmp_path, capture_output=True, text=True, check=False
    )
    assert done.returncode == 0, done.stderr
    assert (tmp_path / "out" / "recheck" / "__main__.py").is_file()
    assert "Paley" in (tmp_path / "out" / "appendix.tex").read_text()
