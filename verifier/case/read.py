"""Read a case file: bytes to text to a checked `Case`, with every problem reported at once."""

import tomllib
from collections.abc import Mapping
from pathlib import Path
from typing import Any

from pydantic import ValidationError

from verifier.case.case import Case, Claim, Condition, Source, Table
from verifier.case.check import (
    Names,
    check_condition,
    check_measured,
    check_reported,
    check_value,
    check_where,
)
from verifier.case.construction import read_graph, read_sequence
from verifier.case.model import CaseFile
from verifier.case.parameters import read_parameters
from verifier.case.problems import Problems
from verifier.case.rows import rows_problem
from verifier.case.section import Section
from verifier.case.shapes import shape_problems
from verifier.errors import CaseError, ExpressionError
from verifier.expressions.names import expand
from verifier.expressions.parse import parse
from verifier.expressions.text import to_text
from verifier.typography.bibtex import check_bibtex
from verifier.typography.escape import unprintable
from verifier.typography.maths import check_head, check_maths

LARGEST = 1 << 20


def read_case(path: Path) -> Case:
    """Return the case that the file at `path` states.

    The catalogue must have been loaded: names are looked up in the registries.

    Parameters
    ----------
    path
        A TOML file of at most 1 MiB.

    Raises
    ------
    CaseError
        If the file cannot be read or states no meaningful case: one line a problem, each with
        file:line, what stands there and what was wanted.
    """
    data = _bytes(path)
    return build_case(str(path), path.stem, data, path.parent)


def build_case(file: str, name: str, data: bytes, folder: Path) -> Case:
    """Return the case of a file's bytes; the parameters are those of `read_case`."""
    text = _text(file, data)
    try:
        document = tomllib.loads(text)
    except (tomllib.TOMLDecodeError, RecursionError) as problem:
        raise CaseError(f"{file}: is no valid TOML: {_one_line(problem)}") from problem
    problems = Problems(file, text)
    raw = _raw(document, problems)
    return _Reader(problems, folder).read(name, raw, data)


def _bytes(path: Path) -> bytes:
    if path.is_dir():
        raise CaseError(f"{path}: is a folder; a case file was wanted")
    if not path.exists():
        raise CaseError(f"{path}: no such file; a case file was wanted")
    try:
        if not path.is_file():
            raise CaseError(f"{path}: is no regular file; a case file was wanted")
        if path.stat().st_size > LARGEST:
            raise CaseError(f"{path}: is larger than 1 MiB; a case file was wanted")
        return path.read_bytes()
    except OSError as problem:
        raise CaseError(f"{path}: cannot be read: {(problem.strerror or '').lower()}") from problem


def _text(file: str, data: bytes) -> str:
    if b"\0" in data:
        raise CaseError(f"{file}: holds a NUL byte; TOML text was wanted")
    try:
        return data.decode("utf-8")
    except UnicodeDecodeError as problem:
        line = data[: problem.start].count(b"\n") + 1
        raise CaseError(f"{file}:{line}: is no UTF-8 text; TOML text was wanted") from problem


def _one_line(problem: Exception) -> str:
    words = " ".join(str(problem).split())
    return words[:1].lower() + words[1:] if words else "nested too deeply"


def _raw(document: Mapping[str, Any], problems: Problems) -> CaseFile:
    try:
        return CaseFile.model_validate(document)
    except ValidationError as failed:
        for path, message in shape_problems(failed, CaseFile):
            problems.add(path, message)
        problems.stop_if_any()
        raise


class _Reader:
    """Reads one file's sections in order, noting problems as it goes."""

    def __init__(self, problems: Problems, folder: Path) -> None:
        self.problems = problems
        self.section = Section(problems, folder)
        self.names = Names()
        self.define: dict[str, Condition] = {}

    def read(self, name: str, raw: CaseFile, data: bytes) -> Case:
        self._texts(raw)
        self._supported(raw)
        parameters = read_parameters(self.section, raw.parameters, self.names)
        self.names.add_numbers(parameters)
        sequence = read_sequence(self.section, raw.sequence, self.names)
        graph = read_graph(self.section, raw.graph, sequence, self.names)
        self.names.add_sizes(sequence, graph)
        where = tuple(
            self._condition(["parameters", "where", i], "where", text, kind="where")
            for i, text in enumerate(raw.parameters.get("where", []))
            if isinstance(text, str)
        )
        self._define(raw.define)
        claims = tuple(self._claim(i, claim, raw) for i, claim in enumerate(raw.claim))
        tables = tuple(self._table(i, table, raw) for i, table in enumerate(raw.table))
        measure = tuple(
            self._condition(["measure", "quantities", i], "[measure] quantities", text, "measured")
            for i, text in enumerate(raw.measure.quantities if raw.measure else [])
        )
        notation = self._notation(raw.notation)
        self.problems.stop_if_any()
        return Case(
            name=name,
            title=raw.title,
            about=raw.about,
            parameters=parameters,
            where=where,
            define=self.define,
            sequence=sequence,
            graph=graph,
            measure=measure,
            claims=claims,
            tables=tables,
            sources={key: Source(key, s.text, s.bibtex) for key, s in raw.source.items()},
            notation=notation,
            text=data,
            inputs=self.section.inputs,
        )

    def _texts(self, raw: CaseFile) -> None:
        texts: list[tuple[list[str | int], str]] = [(["title"], raw.title), (["about"], raw.about)]
        texts += [(["source", key, "text"], source.text) for key, source in raw.source.items()]
        texts += [
            (["source", key, "bibtex"], source.bibtex or "") for key, source in raw.source.items()
        ]
        for path, text in texts:
            bad = check_bibtex(text) if path[-1] == "bibtex" and text else unprintable(text)
            if bad is not None:
                self.problems.add(path, f"{path[-1]}: {bad}")

    def _supported(self, raw: CaseFile) -> None:
        sections = {"least": raw.least, "choose": raw.choose, "profile": raw.profile}
        for key, there in sections.items():
            if there:
                shown = f"[{key}]" if key == "profile" else f"[[{key}]]"
                self.problems.add([key], f"{shown} is not supported by this version")
        if not (raw.claim or raw.table or raw.measure or any(sections.values())):
            self.problems.add(
                ["format"],
                "the case asks for nothing: a [[claim]], [[table]] or [measure] was wanted",
            )

    def _condition(self, path: list[str | int], label: str, text: str, kind: str) -> Condition:
        """Return a checked expression; what is wrong with it is noted, and 0 stands in."""
        stripped = text.strip()
        try:
            tree = parse(stripped)
            expanded = expand(tree, {name: made.expanded for name, made in self.define.items()})
            _CHECKS[kind](tree, self.names, stripped)
        except ExpressionError as problem:
            self.problems.add_expression(path, label, problem)
            tree = expanded = parse("0")
        return Condition(stripped, tree, expanded)

    def _define(self, raw: Mapping[str, str]) -> None:
        for name, text in raw.items():
            path: list[str | int] = ["define", name]
            refused = self.names.refusal(name)
            if refused is not None:
                self.problems.add(path, f"[define] {name}: {refused}")
                continue
            self.define[name] = self._condition(path, f"[define] {name}", text, "value")
            self.names.defined.add(name)

    def _claim(self, i: int, claim: Any, raw: CaseFile) -> Claim:  # noqa: ANN401 a pydantic model
        label = f"claim {claim.name}"
        if any(other.name == claim.name for other in raw.claim[:i]):
            self.problems.add(["claim", i, "name"], f"{label}: a claim of this name stands above")
        if claim.source is not None and claim.source not in raw.source:
            self.problems.add(
                ["claim", i, "source"],
                f"{label}: source: {claim.source!r} is no [source] key; known: "
                f"{', '.join(sorted(raw.source)) or 'none'}",
            )
        says = self._condition(["claim", i, "says"], f"{label}: says", claim.says, "condition")
        given = tuple(
            self._condition(["claim", i, "given", j], f"{label}: given", text, "condition")
            for j, text in enumerate(claim.given)
        )
        return Claim(claim.name, says, given, claim.source)

    def _table(self, i: int, table: Any, raw: CaseFile) -> Table:  # noqa: ANN401 a pydantic model
        label = f"table {table.name}"
        if any(other.name == table.name for other in raw.table[:i]):
            self.problems.add(["table", i, "name"], f"{label}: a table of this name stands above")
        columns = tuple(
            self._condition(["table", i, "columns", j], f"{label}: column", text, "column")
            for j, text in enumerate(table.columns)
        )
        if table.heads and len(table.heads) != len(columns):
            self.problems.add(
                ["table", i, "heads"],
                f"{label}: heads: {len(table.heads)} stand there; {len(columns)} were wanted",
            )
        for j, head in enumerate(table.heads):
            bad = check_head(head)
            if bad is not None:
                self.problems.add(["table", i, "heads", j], f"{label}: heads: {bad}")
        if table.expect is not None:
            path: list[str | int] = ["table", i, "expect"]
            self.section.read_input(path, f"{label}: expect", table.expect)
            bad = rows_problem(self.section.inputs.get(table.expect, b""))
            if bad is not None:
                self.problems.add(path, f"{label}: expect: {table.expect!r} {bad}")
        return Table(table.name, columns, tuple(table.heads), table.expect)

    def _notation(self, raw: Mapping[str, str]) -> dict[str, str]:
        """Return the notation by canonical names."""
        found: dict[str, str] = {}
        for name, text in raw.items():
            bad = check_maths(text)
            if bad is not None:
                self.problems.add(["notation", name], f"[notation] {name}: {bad}")
            try:
                found[to_text(parse(name))] = text
            except ExpressionError as problem:
                self.problems.add_expression(["notation", name], "[notation]", problem)
        return found


_CHECKS = {
    "value": check_value,
    "condition": check_condition,
    "where": check_where,
    "column": check_measured,
    "measured": check_reported,
}
