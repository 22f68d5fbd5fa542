"""The command line: options in, stages called, errors turned into exit statuses.

Stages are imported inside the commands, so that `--help` needs none of the heavy libraries.
"""

import json
import os
import sys
from collections.abc import Callable, Mapping
from functools import wraps
from pathlib import Path
from typing import Any, ParamSpec

import click

from verifier import __version__
from verifier.errors import CaseError, ToolError, VerifierError

INPUT, UNDECIDED, FAILS, TOOL, INTERRUPTED = 2, 3, 4, 6, 130
STRUCTURE = (
    "zero_one",
    "zero_diagonal",
    "symmetric",
)  # always measured, shown where not as it should be
STATUS = {"holds": 0, "outside": 0, "open": UNDECIDED, "fails": FAILS}

CAUTIONS = """A finite check is no proof beyond its range. Theorems that are cited are cited, not
proved here. Small correlation is no evidence of cryptographic strength."""

P = ParamSpec("P")


def _guarded(command: Callable[P, int | None]) -> Callable[P, None]:
    """Turn the package's errors into messages and exit statuses; a bug keeps its traceback."""

    @wraps(command)
    def run(*args: P.args, **kwargs: P.kwargs) -> None:
        try:
            status = command(*args, **kwargs) or 0
            sys.stdout.flush()
        except ToolError as problem:
            _complain(str(problem))
            status = TOOL
        except VerifierError as problem:
            _complain(str(problem))
            status = INPUT
        except KeyboardInterrupt:
            _complain("interrupted: nothing was written")
            status = INTERRUPTED
        except BrokenPipeError:
            os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
            status = 0
        sys.exit(status)

    return run


def _complain(message: str) -> None:
    click.echo(f"primewise: {message}", err=True)


def _accent(text: str) -> str:
    """Return text in the one accent, ink blue and bold, where the output is a terminal."""
    if os.environ.get("NO_COLOR") or not sys.stdout.isatty():
        return text
    return click.style(text, fg=(31, 63, 122), bold=True)


@click.group(context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(__version__, prog_name="primewise")
def main() -> None:
    """Check explicit graph constructions from finite fields, exactly.

    A case file states a construction and claims about it. Every instance is built, measured with
    exact integer arithmetic, and each claim decided: holds, fails, outside (its conditions are not
    met) or open (not decided within the limits).
    """


@main.command(epilog=CAUTIONS)
@click.argument(
    "cases", nargs=-1, required=True, metavar="CASE...", type=click.Path(path_type=Path)
)
@click.option(
    "--out",
    type=click.Path(path_type=Path),
    help="Results folder (several cases: the folder of their folders). Default: results/CASE.",
)
@click.option(
    "--jobs",
    type=click.IntRange(1, 512),
    default=None,
    help="Worker processes. Default: the cores.",
)
@click.option("--json", "as_json", is_flag=True, help="Print summary.json, one line a case.")
@_guarded
def check(cases: tuple[Path, ...], out: Path | None, jobs: int | None, *, as_json: bool) -> int:
    """Run every claim and table of each CASE and write its results folder.

    Example: primewise check cases/paley.toml --out results/paley

    Exit status: 0 everything holds, 4 a claim fails or a table cell differs, 3 something is open,
    2 the input is wrong.
    """
    from verifier.expressions.text import to_text
    from verifier.report import report_text
    from verifier.run import check_case, read_all

    found = 0
    for case in read_all(cases):
        folder = _folder(out, case.name, several=len(cases) > 1)
        summary = check_case(case, folder, jobs or os.cpu_count() or 1, _progress(quiet=as_json))
        if as_json:
            click.echo(_canonical(summary))
        else:
            says = {claim.name: to_text(claim.says.expanded) for claim in case.claims}
            click.echo(report_text(case.title, says, summary, _accent))
            click.echo(f"results in {folder}")
        found = max(found, STATUS[summary["verdict"]])
    return found


@main.command()
@click.argument("rule")
@click.argument("settings", nargs=-1, metavar="NAME=VALUE...")
@click.option("--quantity", "quantities", multiple=True, required=True, help="May be repeated.")
@click.option("--json", "as_json", is_flag=True, help="Print the document of one instance.")
@_guarded
def measure(
    rule: str, settings: tuple[str, ...], quantities: tuple[str, ...], *, as_json: bool
) -> None:
    """Measure one instance of RULE without a case file.

    Example: primewise measure legendre p=29 polynomial=x kind=circulant --quantity agreement_sum
    """
    from verifier.report import number
    from verifier.run import measure_one

    summary = measure_one(rule, settings, quantities)
    if as_json:
        click.echo(_canonical(summary))
        return
    instance = summary["instances"][0]
    for name, value in instance["quantities"].items():
        if name in STRUCTURE and value is True and name not in quantities:
            continue
        if value is None:
            click.echo(f"{name} has no value here")
            continue
        witness = instance["witnesses"].get(name)
        where = f"  attained at ({', '.join(witness)})" if witness else ""
        click.echo(f"{name} = {number(value)}{where}")


@main.command()
@click.argument("results", type=click.Path(path_type=Path))
@click.option(
    "--fragment", is_flag=True, help="Also write fragment.tex, to be input after \\appendix."
)
@click.option("--pdf", is_flag=True, help="Also compile appendix.pdf (needs pdflatex).")
@click.option("--rows", type=click.Choice(["all"]), help="Print every certificate, however many.")
@_guarded
def appendix(results: Path, rows: str | None, *, fragment: bool, pdf: bool) -> None:
    """Write the LaTeX appendix of a results folder.

    Example: primewise appendix results/paley --fragment --pdf
    """
    from verifier.run import write_appendix

    for path in write_appendix(results, fragment=fragment, pdf=pdf, all_rows=rows == "all"):
        click.echo(str(path))


@main.command()
@click.argument("results", type=click.Path(path_type=Path))
@click.option(
    "--budget", type=click.IntRange(1), default=10**10, show_default=True, help="Elementary steps."
)
@_guarded
def recheck(results: Path, budget: int) -> int:
    """Check a results folder again, from the case alone, by the independent re-checker.

    Example: primewise recheck results/paley

    Exit status: 0 accepted, 5 a certificate or digest does not check, 3 something exceeded the
    budget.
    """
    from verifier.recheck.check import main as check_again

    if not results.is_dir():
        raise CaseError(f"{results}: no such folder; a results folder was wanted")
    return int(check_again([str(results), "--budget", str(budget)]))


@main.command()
@click.argument(
    "kinds",
    required=False,
    type=click.Choice(["rules", "graphs", "quantities", "predicates"]),
    metavar="[rules|graphs|quantities|predicates]",
)
@_guarded
def vocabulary(kinds: str | None) -> None:
    """List what a case file may say, with definitions and sources.

    Example: primewise vocabulary quantities
    """
    from verifier.vocabulary import vocabulary_lines

    for line in vocabulary_lines(kinds):
        click.echo(line)


def _folder(out: Path | None, name: str, *, several: bool) -> Path:
    if out is None:
        return Path("results") / name
    return out / name if several else out


def _canonical(document: Mapping[str, Any]) -> str:
    return json.dumps(document, sort_keys=True, separators=(",", ":"), ensure_ascii=False)


def _progress(*, quiet: bool) -> Callable[[int, int], None]:
    """Return a reporter of finished instances: a line on standard error, or nothing."""
    from verifier.progress import bar, lines, silent

    if quiet:
        return silent
    return bar() if sys.stderr.isatty() else lines()
