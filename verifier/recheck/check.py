"""Re-check a results folder: digests, every certificate line, the summary and the tables.

Trusted: Python with its standard library, SHA-256, the files of this folder `recheck`, and the case
file case.toml with inputs/. Nothing else is: every line of certificates.jsonl, summary.json and
tables/ is rebuilt from the case by the definitions and must be the same text. From a certificate
only the factorisations in proofs of primality are taken, and verified. Of appendix.tex and
references.bib, which are prose, the digests alone are checked; the case's name is summary.json's.
"""

import argparse
import json
import sys
from collections.abc import Iterator
from contextlib import contextmanager
from hashlib import sha256
from itertools import zip_longest
from pathlib import Path
from typing import Any

from .case import Case
from .instance import OverBudgetError
from .reals import RecheckError
from .rebuild import Row
from .summary import summary, table_text

LATER = ("appendix.pdf", "fragment.tex", "page.html")  # made on request, after the digests
NEEDED = ("case.toml", "summary.json", "certificates.jsonl", "appendix.tex", "references.bib")
MOST_BYTES, MOST_DIGITS = 256 * 2**20, 400_000


def canonical_json(value: Any) -> str:
    """Return the text of RFC 8785; there are no floats."""
    return json.dumps(value, sort_keys=True, separators=(",", ":"), ensure_ascii=False)


def _object(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    if len(dict(pairs)) < len(pairs):
        raise RecheckError("a repeated key")
    return dict(pairs)


def _refuse(text: str) -> None:
    raise RecheckError(f"{text} is no integer")


@contextmanager
def at(place: str) -> Iterator[None]:
    """Say where it was that something did not check; whatever a hostile folder provokes does not."""
    try:
        yield
    except Exception as error:
        kind = "" if isinstance(error, RecheckError) else f"{type(error).__name__}: "
        raise RecheckError(f"{place}: {kind}{error}") from error


def read_lines(content: bytes, name: str) -> list[Any]:
    """Read one JSON object a line, in canonical form and every line ended."""
    strict: Any = {"parse_float": _refuse, "parse_constant": _refuse, "object_pairs_hook": _object}
    found = []
    for i, line in enumerate(
        content.decode().split("\n")[:-1] if content[-1:] == b"\n" else [""], 1
    ):
        with at(f"{name}:{i}: not canonical JSON"):
            found.append(json.loads(line, **strict))
            if not isinstance(found[-1], dict) or canonical_json(found[-1]) != line:
                raise RecheckError("no object, or other spaces or order")
    return found


def compare_json(given: Any, right: Any, path: str = "") -> None:
    """Refuse the first difference by its path."""
    if isinstance(given, dict) and isinstance(right, dict):
        for key in sorted(given.keys() | right.keys()):
            compare_json(given.get(key, ...), right.get(key, ...), f"{path}.{key}".lstrip("."))
    elif isinstance(given, list) and isinstance(right, list) and len(given) == len(right):
        for i, (a, b) in enumerate(zip(given, right, strict=True)):
            compare_json(a, b, f"{path}[{i}]")
    elif type(given) is not type(right) or given != right:
        a, b = ("nothing" if x is ... else canonical_json(x)[:200] for x in (given, right))
        raise RecheckError(f"{path or 'the line'} says {a} where {b} is right")


def compare_text(content: bytes, right: str, name: str) -> None:
    """Refuse the first line that differs."""
    said, wanted = (text.split("\n") for text in (content.decode(), right))
    for i, (a, b) in enumerate(zip_longest(said, wanted), 1):
        if a != b:
            raise RecheckError(f"{name}:{i}: says {a!r} where {b!r} is right"[:600])


def read_folder(folder: Path) -> dict[str, bytes]:
    """Read all files but those made later, and check digests.txt."""
    files: dict[str, bytes] = {}
    for path in sorted(folder.rglob("*")):
        name = path.relative_to(folder).as_posix()
        if path.is_symlink() or not (path.is_file() or path.is_dir()):
            raise RecheckError(f"{name}: neither a file nor a folder")
        if path.is_file() and path.stat().st_size > MOST_BYTES:
            raise RecheckError(f"{name}: larger than 256 MB")
        later = name in LATER or name.startswith(("formal/", "recheck/__pycache__/"))
        if path.is_file() and not later:
            files[name] = path.read_bytes()
    listed = files.pop("digests.txt", b"")
    for name in sorted(set(NEEDED) - files.keys()):
        raise RecheckError(f"{name}: missing")
    for name in files:
        if f"  {name}\n".encode() not in listed:
            raise RecheckError(f"{name}: a stranger, not listed in digests.txt")
    lines = (f"{sha256(files[name]).hexdigest()}  {name}\n" for name in sorted(files))
    compare_text(listed, "".join(lines), "digests.txt")
    return files


class Budget:
    """The steps that remain: about one operation on one term or machine word each."""

    def __init__(self, steps: int) -> None:
        self.steps = steps

    def spend(self, steps: int) -> None:
        """Take so many steps, or refuse."""
        if steps > self.steps:
            raise OverBudgetError
        self.steps -= steps


def check(folder: Path, steps: int) -> int:
    """Check a folder, print the outcome and return the exit status."""
    files = read_folder(folder)
    [said] = read_lines(files["summary.json"], "summary.json")
    lines = read_lines(files["certificates.jsonl"], "certificates.jsonl")
    case = Case(files, Budget(steps).spend)
    for name in files.keys() - set(NEEDED) - case.belonging():
        if not name.startswith("recheck/"):
            raise RecheckError(f"{name}: a stranger, which the case does not name")
    skipped: list[str] = []
    try:
        instances = list(case.instances({}))
    except OverBudgetError:
        skipped, instances = ["the list of instances"], [line["parameters"] for line in lines]
    documents, ratios, name = [], [], lines[-1]["case"] if lines else ""
    for i in range(max(len(instances), len(lines))):
        with at(f"certificates.jsonl:{i + 1}"):
            if i >= len(instances):
                raise RecheckError("no such instance")
            row = Row(case, instances[i], lines[i] if i < len(lines) else {})
            document, ratio = row.document(i, name)
            compare_json(lines[i] if i < len(lines) else ..., document)
            skipped += [f"{what} at instance {i}" for what in row.skipped]
            documents.append(document)
            ratios.append(ratio)
    for table in case.tables:
        path = f"tables/{table['name']}.csv"
        compare_text(files[path], table_text(table, documents), path)
    right = summary(case, name, documents, ratios)
    with at("summary.json:1"):
        compare_json(said, right)
    print("".join(f"not re-checked: {what}\n" for what in skipped), end="")
    counts = f"{len(documents)} instances, {len(case.claims)} claims"
    print(f"re-checked: {counts}, verdict {right['verdict']}")
    return 3 if skipped else 0


def main(arguments: list[str]) -> int:
    """Run the re-checker and return its exit status: 0, 2, 3 or 5."""
    parser = argparse.ArgumentParser(prog="recheck", description="Check a results folder again.")
    parser.add_argument("folder", type=Path)
    parser.add_argument("--budget", type=int, default=10**10, metavar="STEPS")
    digits = sys.get_int_max_str_digits()
    try:
        options = parser.parse_args(arguments)
        sys.set_int_max_str_digits(MOST_DIGITS)
        with at("recheck"):
            return check(options.folder, options.budget)
    except SystemExit as stop:
        return int(stop.code or 0)
    except RecheckError as error:
        print(" ".join(str(error).split())[:600], file=sys.stderr)
        return 5
    finally:
        sys.set_int_max_str_digits(digits)
