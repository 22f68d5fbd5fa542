"""The pipeline: the only place that knows the order of the stages."""

import json
import re
from collections.abc import Iterator, Mapping, Sequence
from pathlib import Path
from typing import Any

from verifier import catalogue
from verifier.appendix.compile import compile_pdf
from verifier.appendix.write import documents
from verifier.case.case import Case
from verifier.case.combinations import combinations
from verifier.case.read import build_case, read_case
from verifier.certificate import canonical_text, digest
from verifier.errors import CaseError
from verifier.instance.certify import certify
from verifier.instance.conditions import kept, refuse_before_building
from verifier.plan import Plan, make_plan
from verifier.pool import certify_all
from verifier.progress import Progress
from verifier.registry import PREDICATES, QUANTITIES
from verifier.results import (
    check_digests,
    check_target,
    rechecker_files,
    replace_file,
    write_results,
)
from verifier.statement import case_text
from verifier.summary import summarise, table_text


def read_all(paths: Sequence[Path]) -> list[Case]:
    """Read every case before the first is run.

    Raises
    ------
    CaseError
        With the problems of all of them.
    """
    catalogue.load()
    cases: list[Case] = []
    problems: list[str] = []
    for path in paths:
        try:
            cases.append(read_case(path))
        except CaseError as problem:
            problems.extend(problem.problems)
    names = [case.name for case in cases]
    for name in {name for name in names if names.count(name) > 1}:
        problems += [f"two cases are called {name}; their results would lie in one folder"]
    if problems:
        raise CaseError(*problems)
    return cases


def check_case(case: Case, folder: Path, jobs: int, progress: Progress) -> dict[str, Any]:
    """Run a case and write its results folder.

    Parameters
    ----------
    case
        As read.
    folder
        Where the results go; an older results folder there is replaced whole.
    jobs
        Worker processes, 1 at least; the results do not depend on it.
    progress
        Told how many instances are done.

    Returns
    -------
    dict
        The summary, as in `summary.json`.
    """
    check_target(folder)
    plan = _plan(case)
    found = combinations(case, lambda made: kept(case, made))
    refuse_before_building(case, found)
    certificates, tightest = certify_all(plan, found, jobs, progress)
    summary = summarise(case, certificates, tightest)
    write_results(folder, _contents(case, certificates, summary))
    return summary


def measure_one(rule: str, settings: Sequence[str], quantities: Sequence[str]) -> dict[str, Any]:
    """Measure one instance that the command line states, by way of a case of its own."""
    catalogue.load()
    text = case_text(rule, settings, quantities)
    try:
        case = build_case("command line", "measure", text.encode(), Path.cwd())
    except CaseError as problem:  # the lines are those of a file that the user never saw
        stated = (re.sub(r"^command line:\d+: ", "", line) for line in problem.problems)
        raise CaseError(*stated) from problem
    made = combinations(case, lambda _: True)
    if len(made) != 1:
        raise CaseError(f"{len(made)} instances are stated; one was wanted")
    certificate, _ = certify(_plan(case), made[0], 0)
    if "reason" in certificate:
        raise CaseError(certificate["reason"])
    return summarise(case, [certificate], {})


def write_appendix(folder: Path, *, fragment: bool, pdf: bool, all_rows: bool) -> Iterator[Path]:
    """Write the appendix of a results folder anew; yield what was written."""
    catalogue.load()
    case, certificates, summary = _read_results(folder)
    check_digests(folder)
    try:
        contents = _contents(case, certificates, summary, all_rows=all_rows)
    except (KeyError, TypeError, ValueError, AttributeError) as problem:
        raise CaseError(f"{folder}: its documents have another form than this tool's") from problem
    replace_file(folder, "appendix.tex", contents["appendix.tex"])
    yield folder / "appendix.tex"
    if fragment:
        text, _ = _documents(
            case, certificates, summary, contents, all_rows=all_rows, fragment=True
        )
        (folder / "fragment.tex").write_text(text, encoding="utf-8")
        yield folder / "fragment.tex"
    if pdf:
        compile_pdf(folder, "appendix")
        yield folder / "appendix.pdf"


def _plan(case: Case) -> Plan:
    return make_plan(case, frozenset({*QUANTITIES.entries, *PREDICATES.entries}))


def _contents(
    case: Case,
    certificates: Sequence[Mapping[str, Any]],
    summary: Mapping[str, Any],
    *,
    all_rows: bool = False,
) -> dict[str, bytes]:
    """Return every file of a results folder but its digests."""
    found: dict[str, bytes] = {
        "case.toml": case.text,
        "certificates.jsonl": "".join(
            canonical_text(dict(one)) + "\n" for one in certificates
        ).encode(),
        "summary.json": (canonical_text(dict(summary)) + "\n").encode(),
    }
    found |= {f"inputs/{name}": data for name, data in case.inputs.items()}
    found |= {
        f"tables/{table.name}.csv": table_text(table, certificates).encode()
        for table in case.tables
    }
    found |= rechecker_files()
    appendix, references = _documents(case, certificates, summary, found, all_rows=all_rows)
    found |= {"appendix.tex": appendix.encode(), "references.bib": references.encode()}
    return found


def _documents(
    case: Case,
    certificates: Sequence[Mapping[str, Any]],
    summary: Mapping[str, Any],
    contents: Mapping[str, bytes],
    *,
    all_rows: bool,
    fragment: bool = False,
) -> tuple[str, str]:
    own = ("appendix.tex", "references.bib")
    digests = {name: digest(data) for name, data in contents.items() if name not in own}
    return documents(case, summary, certificates, digests, fragment=fragment, all_rows=all_rows)


def _read_results(folder: Path) -> tuple[Case, list[dict[str, Any]], dict[str, Any]]:
    """Return case, certificates and summary of a results folder."""
    try:
        data = (folder / "case.toml").read_bytes()
        lines = (folder / "certificates.jsonl").read_text(encoding="utf-8").splitlines()
        certificates = [json.loads(line) for line in lines]
        summary = json.loads((folder / "summary.json").read_text(encoding="utf-8"))
        case = build_case(str(folder / "case.toml"), summary["case"], data, folder / "inputs")
        if not certificates or len(certificates) != len(summary["instances"]):
            raise CaseError(f"{folder}: summary and certificates speak of other instances")
    except (OSError, ValueError, KeyError, TypeError) as problem:
        raise CaseError(f"{folder}: is no results folder of this tool") from problem
    return case, certificates, summary
