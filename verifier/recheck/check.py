"""Re-check a results folder: digests, every certificate line, the summary and the tables.

Trusted: Python with its standard library, SHA-256, the files of this folder `recheck`, and the case
file case.toml with inputs/. Nothing else is: every line of certificates.jsonl, summary.json and
tables/ is rebuilt from the case by the definitions and must be the same text. From a certificate
only the factorisations in proofs of primality are taken, and verified. Of appendix.tex and
references.bib, which are prose, the digests alone are checked; the name of the case is taken from
the certificates. In a folder from elsewhere, delete `recheck/__pycache__` before you begin.
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
from .instance import Instance, OverBudgetError
from .reals import RecheckError
from .rebuild import document
from .summary import summary, table_text

LATER = ("appendix.pdf", "fragment.tex", "page.html")  # made on request, after the digests
NEEDED = ("case.toml", "summary.json", "certificates.jsonl", "appendix.tex", "references.bib")
MOST_BYTES, MOST_DIGITS = 256 * 2**20, 400_000
NOTHING: Any = ...


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
    """Say where something did not check; whatever a hostile folder provokes does not check."""
    try:
        yield
    except Exception as error:
        kind = "" if isinstance(error, RecheckError) else f"{type(error).__name__}: "
        raise RecheckError(f"{place}: {kind}{error}") from error


def read_lines(content: bytes, name: str) -> list[Any]:
    """Read one JSON object a line, in canonical form and every line ended."""
    strict: Any = {"parse_float": _refuse, "parse_constant": _refuse, "object_pairs_hook": _object}
    found = []
    lines = content.decode().split("\n") if content[-1:] == b"\n" else ["", ""]
    for i, line in enumerate(lines[:-1], 1):
        with at(f"{name}:{i}: not canonical JSON"):
            found.append(json.loads(line, **strict))
            if not isinstance(found[-1], dict) or canonical_json(found[-1]) != line:
                raise RecheckError("no object, or other spaces or order")
    return found


def compare_all(given: Any, right: Any, path: str = "") -> None:
    """Refuse the first difference, by its path."""
    if isinstance(given, dict) and isinstance(right, dict):
        for key in sorted(given.keys() | right.keys()):
            here = f"{path}.{key}".lstrip(".")
            compare_all(given.get(key, NOTHING), right.get(key, NOTHING), here)
    elif isinstance(given, list) and isinstance(right, list):
        for i, (a, b) in enumerate(zip_longest(given, right, fillvalue=NOTHING)):
            compare_all(a, b, f"{path}[{i}]")
    elif type(given) is not type(right) or given != right:
        a, b = ("nothing" if x is NOTHING else canonical_json(x)[:200] for x in (given, right))
        raise RecheckError(f"{path or 'it'} says {a} where {b} is right")


def compare_text(content: bytes, right: str, name: str) -> None:
    """Refuse the first line that differs."""
    lines = zip_longest(content.decode().split("\n"), right.split("\n"), fillvalue=NOTHING)
    for i, (a, b) in enumerate(lines, 1):
        with at(f"{name}:{i}"):
            compare_all(a, b, "the line")


def read_folder(folder: Path) -> dict[str, bytes]:
    """Read all files but those made later, and check digests.txt."""
    files: dict[str, bytes] = {}
    for path in sorted(folder.rglob("*")):
        name = path.relative_to(folder).as_posix()
        later = name in LATER or name.startswith(("formal/", "recheck/__pycache__/"))
        if path.is_symlink() or not (path.is_dir() or path.is_file()):
            raise RecheckError(f"{name}: neither a file nor a folder")
        if path.is_file() and not later:
            if path.stat().st_size > MOST_BYTES:
                raise RecheckError(f"{name}: larger than 256 MB")
            files[name] = path.read_bytes()
    listed = files.pop("digests.txt", b"")
    for name in [*sorted(set(NEEDED) - files.keys()), *files]:
        if f"  {name}\n".encode() not in listed or name not in files:
            raise RecheckError(f"{name}: missing, or a stranger that digests.txt does not list")
    lines = (f"{sha256(files[name]).hexdigest()}  {name}\n" for name in sorted(files))
    compare_text(listed, "".join(lines), "digests.txt")
    return files


def check(folder: Path, steps: int) -> int:
    """Check a folder, print the outcome and return the exit status."""
    files = read_folder(folder)
    [said] = read_lines(files["summary.json"], "summary.json")
    lines = read_lines(files["certificates.jsonl"], "certificates.jsonl")
    case = Case(files, steps)
    for path in files.keys() - set(NEEDED) - case.belonging():
        if not path.startswith("recheck/"):
            raise RecheckError(f"{path}: a stranger, which the case does not name")
    skipped, documents, ratios = list[str](), [], []
    name = lines[-1].get("case") if lines else ""
    try:
        instances = list(case.instances({}))
    except OverBudgetError:
        skipped, instances = ["the list of instances"], [line["parameters"] for line in lines]
    for i, (parameters, line) in enumerate(zip_longest(instances, lines, fillvalue=NOTHING)):
        with at(f"certificates.jsonl:{i + 1}"):
            if parameters is NOTHING:
                raise RecheckError("no such instance")
            instance = Instance(case, parameters, line)
            right, ratio = document(instance, i, name)
            compare_all(line, right)
            skipped += [f"{what} at instance {i}" for what in instance.skipped]
            documents.append(right)
            ratios.append(ratio)
    for table in case.tables:
        path = f"tables/{table['name']}.csv"
        compare_text(files[path], table_text(table, documents), path)
    right = summary(case, name, documents, ratios)
    with at("summary.json:1"):
        compare_all(said, right)
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
