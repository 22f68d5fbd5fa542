"""Every demonstration's appendix and fragment compile without faults, and `--pdf` makes the PDF.

The engine is the outside judge: no box more than 5 pt too wide, no undefined reference, no missing
character.
"""

import os
import re
import shutil
import subprocess
from pathlib import Path

import pytest
from click.testing import CliRunner

from verifier.cli import main

DEMOS = sorted(p.stem for p in (Path(__file__).resolve().parents[2] / "cases").glob("*.toml"))
HOST = r"""\documentclass{amsart}
\usepackage{amsmath,amssymb,amsthm,booktabs,longtable,array,xcolor,url}
\begin{document}
\title{A host}\maketitle
\section{The theorem}
\appendix
\section{Verification}
\input{fragment}
\end{document}
"""

requires_latex = pytest.mark.skipif(
    shutil.which("pdflatex") is None and "CI" not in os.environ, reason="no pdflatex"
)


def faults(folder, name):
    command = ["pdflatex", "-no-shell-escape", "-interaction=nonstopmode", "-halt-on-error", name]
    for _ in range(3):
        done = subprocess.run(command, cwd=folder, capture_output=True, check=False, timeout=120)
        assert done.returncode == 0, done.stdout[-2000:]
    log = (folder / f"{name}.log").read_text(encoding="latin-1")
    wide = [float(points) for points in re.findall(r"Overfull \\[hv]box \(([0-9.]+)pt", log)]
    unresolved = re.findall(r".*(?:undefined|multiply defined|Missing character).*", log)
    return [points for points in wide if points > 5] + unresolved


@requires_latex
@pytest.mark.parametrize("name", DEMOS)
def test_appendix_and_fragment_compile(name, results, tmp_path):
    folder = tmp_path / name
    shutil.copytree(results / name, folder)
    run = CliRunner().invoke(main, ["appendix", str(folder), "--fragment", "--pdf"])
    assert run.exit_code == 0, run.output
    assert (folder / "appendix.pdf").read_bytes().startswith(b"%PDF")
    assert (folder / "appendix.tex").read_bytes() == (results / name / "appendix.tex").read_bytes()
    (folder / "host.tex").write_text(HOST)
    assert faults(folder, "appendix") == []
    assert faults(folder, "host") == []


def test_without_an_engine_the_tex_is_written_and_the_status_is_6(results, tmp_path, monkeypatch):
    folder = tmp_path / "paley"
    shutil.copytree(results / "paley", folder)
    monkeypatch.setenv("PATH", str(tmp_path))
    run = CliRunner().invoke(main, ["appendix", str(folder), "--pdf"])
    assert (run.exit_code, "apt-get install" in run.stderr) == (6, True), run.output
    assert (folder / "appendix.tex").exists()
