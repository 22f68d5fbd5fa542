"""Run pdflatex safely: no shell, no files from elsewhere, a time limit, the same bytes again."""

import os
import re
import shutil
import subprocess
import tempfile
from pathlib import Path

from verifier.errors import ToolError

APT = (
    "apt-get install -y --no-install-recommends texlive-latex-recommended texlive-pictures lmodern"
)
PASSES = 3
SECONDS = 180
PROBLEM = re.compile(r"^(?:[^\s:]+:[0-9]+: |! ).*$", re.MULTILINE)


def compile_pdf(folder: Path, name: str = "appendix") -> Path:
    """Compile `name`.tex of a folder and put `name`.pdf beside it.

    Everything else that pdflatex writes stays in a temporary folder.

    Parameters
    ----------
    folder
        Where `name`.tex stands.
    name
        A file name without ending.

    Returns
    -------
    Path
        The PDF, the same bytes for the same source.

    Raises
    ------
    ToolError
        If pdflatex is missing, stops with an error, or takes longer than 3 minutes a pass.
    """
    engine = shutil.which("pdflatex")
    if engine is None:
        raise ToolError(f"pdflatex was not found, {name}.tex is written; for the PDF: {APT}")
    with tempfile.TemporaryDirectory(prefix="primewise-") as made:
        workplace = Path(made)
        shutil.copyfile(folder / f"{name}.tex", workplace / f"{name}.tex")
        for _ in range(PASSES):
            _run(engine, workplace, name)
        compiled = folder / f"{name}.pdf"
        staged = folder / f".{name}.pdf.part"
        shutil.copyfile(workplace / f"{name}.pdf", staged)
        staged.replace(compiled)
    return compiled


def _run(engine: str, workplace: Path, name: str) -> None:
    command = [
        engine,
        "-no-shell-escape",
        "-interaction=nonstopmode",
        "-halt-on-error",
        "-file-line-error",
        f"{name}.tex",
    ]
    try:
        ended = subprocess.run(  # noqa: S603 a fixed command on a file that this package wrote
            command,
            cwd=workplace,
            env=_surroundings(workplace),
            stdin=subprocess.DEVNULL,
            stdout=subprocess.DEVNULL,
            stderr=subprocess.DEVNULL,
            timeout=SECONDS,
            check=False,
        )
    except subprocess.TimeoutExpired as late:
        raise ToolError(f"pdflatex took longer than {SECONDS} seconds on {name}.tex") from late
    except OSError as problem:
        raise ToolError(f"pdflatex could not be run: {problem.strerror}") from problem
    if ended.returncode != 0:
        raise ToolError(f"pdflatex stopped on {name}.tex: {_first_problem(workplace, name)}")


def _surroundings(workplace: Path) -> dict[str, str]:
    return {
        "PATH": os.environ.get("PATH", os.defpath),
        "HOME": str(workplace),
        "LC_ALL": "C",
        "openin_any": "p",
        "openout_any": "p",
        "shell_escape": "f",
        "max_print_line": "1000",
        "SOURCE_DATE_EPOCH": "0",
        "FORCE_SOURCE_DATE": "1",
    }


def _first_problem(workplace: Path, name: str) -> str:
    log = workplace / f"{name}.log"
    if not log.is_file():
        return "it wrote no log"
    found = PROBLEM.search(log.read_text(encoding="latin-1"))
    return found.group().strip() if found else "its log names no error"
