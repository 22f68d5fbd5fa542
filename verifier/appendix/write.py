"""Write the appendix and its bibliography from a case, its summary and its certificates."""

from collections.abc import Mapping, Sequence
from typing import Any

from verifier import __version__
from verifier.appendix.bibliography import Citations, bib_text, entries, item
from verifier.appendix.construction import graph_sentences, sequence_sentences
from verifier.appendix.environment import render
from verifier.appendix.facts import Certificate, Facts, in_order
from verifier.appendix.formulas import Formulas, typed
from verifier.appendix.parameters import parameter_sentence
from verifier.appendix.proofs import sketches
from verifier.appendix.rows import (
    BAD,
    DIGEST,
    EXTREMES,
    certificate_tables,
    measured_table,
    widths,
)
from verifier.appendix.statement import (
    claim_entries,
    discriminant_sentences,
    hypotheses,
    notation_rows,
)
from verifier.appendix.tables import case_tables
from verifier.appendix.verdicts import failure_groups, summary_rows, tightest_sentences
from verifier.case.case import Case
from verifier.typography.escape import Latex, plain, tex

PACKAGES = ("amsmath", "amssymb", "amsthm", "booktabs", "longtable", "array", "xcolor", "url")
LONGEST_LINE = 180
RUNNING = 50
CONVENTIONS = Latex(
    r"An irrational value is printed as $1.234_{5}^{6}$: it lies between $1.2345$ (below) and "
    r"$1.2346$ (above); both ends are rounded outward."
)

Summary = Mapping[str, Any]


def appendix_text(
    case: Case,
    summary: Summary,
    certificates: Sequence[Certificate],
    digests: Mapping[str, str],
    *,
    fragment: bool = False,
    all_rows: bool = False,
) -> str:
    """Return the appendix alone; parameters and errors are those of `documents`."""
    made = documents(case, summary, certificates, digests, fragment=fragment, all_rows=all_rows)
    return made[0]


def documents(
    case: Case,
    summary: Summary,
    certificates: Sequence[Certificate],
    digests: Mapping[str, str],
    *,
    fragment: bool = False,
    all_rows: bool = False,
) -> tuple[str, str]:
    r"""Return the appendix and `references.bib`, the sources that it cites.

    Both are ASCII; the LaTeX has lines of at most 200 characters.

    Parameters
    ----------
    case
        The case that was run.
    summary, certificates
        What `summary.json` and the lines of `certificates.jsonl` hold.
    digests
        File name to SHA-256 in hexadecimal, of the results folder's files but these two.
    fragment
        The form that is input in a host document after \appendix, instead of a document.
    all_rows
        Print all rows, also beyond 5,000.

    Raises
    ------
    IdentityError
        If an identity behind a sketch is false.
    """
    printer = _Printer(case, summary, certificates, fragment=fragment)
    values = printer.values(digests, all_rows=all_rows)
    form = "fragment" if fragment else "appendix"
    text = folded(render(f"appendix/{form}.tex.jinja", **values).code)
    return text, bib_text(printer.citations.cited())


class _Printer:
    """Collects what the templates print."""

    def __init__(
        self, case: Case, summary: Summary, certificates: Sequence[Certificate], *, fragment: bool
    ) -> None:
        self.case = case
        self.summary = in_order(summary, case)
        self.facts = Facts([in_order(found, case) for found in certificates])
        self.formulas = Formulas(case)
        self.citations = Citations(entries(case))
        self.fragment = fragment

    def values(self, digests: Mapping[str, str], *, all_rows: bool) -> dict[str, object]:
        """Return everything that the templates name."""
        values = {
            "version": __version__,
            "name": "appendix",
            "packages": [Latex(package) for package in PACKAGES],
            "heading": Latex(r"\subsection" if self.fragment else r"\section"),
            "title": self.case.title,
            "running": _running(self.case.title),
            "about": self.case.about,
            "cite": self.citations.cite,
            "conventions": CONVENTIONS,
            "digest_length": DIGEST,
            "half_bad": BAD // 2,
            "extremes": EXTREMES,
            "digests": [_file(name, digests[name]) for name in sorted(digests)],
            **self._statement(),
            **self._evidence(all_rows=all_rows),
        }
        body = render("appendix/body.tex.jinja", **values)
        return {**values, "body": body, **self._references()}

    def _statement(self) -> dict[str, object]:
        case, facts, formulas, citations = self.case, self.facts, self.formulas, self.citations
        return {
            "construction": [
                *sequence_sentences(case, citations.cite, citations.source),
                *graph_sentences(case, citations.cite),
            ],
            "parameters": [parameter_sentence(parameter) for parameter in case.parameters],
            "where": [formulas.inline(condition) for condition in case.where],
            "total": facts.total,
            "nowhere": facts.total - len(facts.built),
            "primes": any(found.get("primality") for found in facts.certificates),
            "notation": notation_rows(case, facts, formulas, citations),
            "hypotheses": hypotheses(case, formulas),
            "discriminants": discriminant_sentences(case, facts),
            "claims": claim_entries(case, self.summary, formulas, citations),
            "sketches": sketches(facts, citations.cite),
        }

    def _evidence(self, *, all_rows: bool) -> dict[str, object]:
        case, summary, found = self.case, self.summary, self.facts.certificates
        empty = any(claim["trivial"] for claim in summary["claims"])
        heads = {
            table.name: [self.formulas.inline(column) for column in table.columns]
            for table in case.tables
        }
        return {
            "summary": summary_rows(summary),
            "tightest": tightest_sentences(summary, found),
            "failures": failure_groups(case, summary, found, typed),
            "tables": case_tables(case, summary, found, heads, all_rows=all_rows),
            "certificates": certificate_tables(case, summary, found, typed, all_rows=all_rows),
            "measured": measured_table(case, found, typed, all_rows=all_rows),
            "widths": widths(found, wide_verdicts=empty),
            "empty_somewhere": empty,
        }

    def _references(self) -> dict[str, object]:
        cited = self.citations.cited()
        references = [
            {
                "label": f"A{number}" if self.fragment else "",
                "key": Latex(entry.key),
                "text": item(entry),
            }
            for number, entry in enumerate(cited, start=1)
        ]
        widest = f"A{len(cited)}" if self.fragment else str(len(cited))
        return {"references": references, "widest": widest}


def _running(title: str) -> Latex:
    """Return what stands above the pages: the title, or its beginning."""
    words = plain(title)
    if len(words) <= RUNNING:
        return Latex(f"{{{tex(words)}}}")
    return Latex(f"{{{tex(words[:RUNNING].rpartition(' ')[0] or words[:RUNNING])}\\ldots}}")


def _file(name: str, digest: str) -> dict[str, Latex]:
    parts = tex(name).replace("/", r"/\allowbreak ")
    halves = r"\allowbreak ".join(digest[at : at + 32] for at in range(0, len(digest), 32))
    return {"name": Latex(f"\\texttt{{{parts}}}"), "digest": Latex(f"\\texttt{{{halves}}}")}


def folded(source: str) -> str:
    """Return LaTeX source with long lines cut at blanks, and without repeated empty lines.

    A comment is never cut, nor a blank after a backslash.
    """
    lines: list[str] = []
    for line in source.splitlines():
        kept = line.rstrip()
        if kept or (lines and lines[-1]):
            lines += _cut(kept)
    return "\n".join(lines) + "\n"


def _cut(line: str) -> list[str]:
    pieces: list[str] = []
    while len(line) > LONGEST_LINE and not line.startswith("%"):
        at = line.rfind(" ", 0, LONGEST_LINE)
        while at > 0 and line[at - 1] == "\\":
            at = line.rfind(" ", 0, at)
        if at <= 0:
            break
        pieces.append(line[:at])
        line = line[at + 1 :]
    return [*pieces, line]
