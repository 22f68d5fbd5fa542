"""Re-check a results folder: digests, every certificate line, tables and summary.

Trusted: Python and its standard library, SHA-256, the files of this folder `recheck`, and the case file
case.toml with inputs/. Nothing else is: every line of certificates.jsonl, summary.json and tables/ is
rebuilt from the case by the definitions and must be the same text; factorisations in proofs of primality
are the only thing taken from a certificate, and they are verified. Of appendix.tex and references.bib,
which are prose, only the digests are checked. The name of the case is taken from summary.json.
"""

import argparse
import json
import sys
from hashlib import sha256
from pathlib import Path
from typing import Any

from .case import Case
from .instance import OverBudgetError
from .reals import RecheckError
from .rebuild import Row, summary, table_text

LATER = ("appendix.pdf", "fragment.tex", "page.html")
MOST_BYTES, MOST_DIGITS = 256 * 2**20, 400_000


def canonical_json(value: Any) -> str:
    """Return the text of RFC 8785; there are no floats."""
    return json.dumps(value, sort_keys=True, separators=(",", ":"), ensure_ascii=False)


def _pairs(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    found = dict(pairs)
    if len(found) < len(pairs):
        raise RecheckError("a repeated key")
    return found


def _refuse(text: str) -> None:
    raise RecheckError(f"the number {text}, which is no integer")


def read_json(text: str, place: str) -> Any:
    """Read strict JSON in canonical form."""
    try:
        found = json.loads(
            text, object_pairs_hook=_pairs, parse_float=_refuse, parse_constant=_refuse
        )
    except (RecheckError, ValueError) as error:
        raise RecheckError(f"{place}: not canonical JSON: {error}") from None
    if canonical_json(found) != text:
        raise RecheckError(f"{place}: not canonical JSON: other spacing or order than canonical")
    return found


def compare_json(given: Any, right: Any, place: str, path: str = "") -> None:
    """Refuse the first difference by its path."""
    if isinstance(given, dict) and isinstance(right, dict):
        for key in sorted(given.keys() | right.keys()):
            compare_json(given.get(key, ...), right.get(key, ...), place, f"{path}.{key}")
    elif isinstance(given, list) and isinstance(right, list) and len(given) == len(right):
        for i, (a, b) in enumerate(zip(given, right, strict=True)):
            compare_json(a, b, place, f"{path}[{i}]")
    elif type(given) is not type(right) or given != right:
        said, wanted = (
            "nothing" if part is ... else canonical_json(part)[:200] for part in (given, right)
        )
        raise RecheckError(f"{place}: {path.lstrip('.')} says {said} where {wanted} is right")


def compare_text(given: str, right: str, name: str) -> None:
    """Refuse the first line that differs."""
    said, wanted = given.split("\n"), right.split("\n")
    for i in range(max(len(said), len(wanted)) if given != right else 0):
        a, b = ((repr(lines[i][:200]) if i < len(lines) else "nothing") for lines in (said, wanted))
        if a != b:
            raise RecheckError(f"{name} line {i + 1}: says {a} where {b} is right")


def read_folder(folder: Path) -> dict[str, bytes]:
    """Read all files but those made later, and check digests.txt."""
    files: dict[str, bytes] = {}
    for path in sorted(folder.rglob("*")):
        name = path.relative_to(folder).as_posix()
        if path.is_symlink() or not (path.is_file() or path.is_dir()):
            raise RecheckError(f"{name}: neither a file nor a folder")
        if path.is_dir() or name in LATER or name.startswith(("formal/", "recheck/__pycache__/")):
            continue
        if path.stat().st_size > MOST_BYTES:
            raise RecheckError(f"{name}: larger than 256 MB")
        files[name] = path.read_bytes()
    for name in ("digests.txt", "case.toml", "summary.json", "certificates.jsonl"):
        if name not in files:
            raise RecheckError(f"{name}: missing")
    listed = files.pop("digests.txt").decode()
    names = {line[66:] for line in listed.splitlines()}
    for name in files:
        if name not in names:
            raise RecheckError(f"{name}: a stranger, not listed in digests.txt")
    lines = (f"{sha256(files[name]).hexdigest()}  {name}\n" for name in sorted(files))
    compare_text(listed, "".join(lines), "digests.txt")
    return files


def check(folder: Path, steps: int) -> int:
    """Check a folder, print the outcome and return the exit status."""
    files = read_folder(folder)
    left = [steps]

    def spend(cost: int) -> None:
        if cost > left[0]:
            raise OverBudgetError
        left[0] -= cost

    case = Case(files, spend)
    given = read_json(files["summary.json"].decode().removesuffix("\n"), "summary.json")
    if files["summary.json"][-1:] != b"\n":
        raise RecheckError("summary.json: no newline at the end")
    name = given.get("case")
    text = files["certificates.jsonl"].decode()
    lines = text.split("\n")
    if lines.pop():
        raise RecheckError("certificates.jsonl: no newline at the end")
    skipped: list[str] = []
    documents, ratios = [], []
    said = [read_json(line, f"certificates.jsonl line {i}") for i, line in enumerate(lines, 1)]
    try:
        instances = list(case.instances({}))
    except OverBudgetError:
        skipped.append("the list of instances")
        instances = [line["parameters"] for line in said]
    for i, parameters in enumerate(instances):
        place = f"certificates.jsonl line {i + 1}"
        if i >= len(said):
            raise RecheckError(f"{place}: missing; the case has {len(instances)} instances")
        line = said[i]
        row = Row(case, parameters, line)
        document, ratio = row.document(i, name)
        compare_json(line, document, place)
        skipped += [f"instance {i}: {quantity}" for quantity in row.skipped]
        documents.append(document)
        ratios.append(ratio)
    if len(said) > len(instances):
        raise RecheckError(
            f"certificates.jsonl line {len(instances) + 1}: more than the instances of the case"
        )
    for table in case.tables:
        path = f"tables/{table['name']}.csv"
        compare_text(files[path].decode(), table_text(case, table, documents), path)
    right = summary(case, name, documents, ratios)
    compare_json(given, right, "summary.json")
    for item in skipped:
        print(f"not re-checked: {item}")
    print(
        f"re-checked: {len(documents)} instances, {len(case.claims)} claims, verdict {right['verdict']}"
    )
    return 3 if skipped else 0


def main(arguments: list[str]) -> int:
    """Run the re-checker and return its exit status: 0, 2, 3 or 5."""
    parser = argparse.ArgumentParser(prog="recheck", description="Check a results folder again.")
    parser.add_argument("folder", type=Path)
    parser.add_argument("--budget", type=int, default=10**10, metavar="STEPS")
    try:
        options = parser.parse_args(arguments)
    except SystemExit as stop:
        return int(stop.code or 0)
    digits = sys.get_int_max_str_digits()
    sys.set_int_max_str_digits(MOST_DIGITS)
    try:
        return check(options.folder, options.budget)
    except Exception as error:
        words = " ".join(str(error).split()) or type(error).__name__
        kind = (
            "" if isinstance(error, RecheckError) else f"cannot be read: {type(error).__name__}: "
        )
        print(f"recheck: {kind}{words[:600]}", file=sys.stderr)
        return 5
    finally:
        sys.set_int_max_str_digits(digits)
