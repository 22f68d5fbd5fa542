"""The statement part of an appendix: notation, hypotheses, claims as the author wrote them."""

from collections.abc import Mapping, Sequence
from typing import Any

from verifier.appendix.bibliography import Citations
from verifier.appendix.constants import constant_remark
from verifier.appendix.environment import has_template, render
from verifier.appendix.facts import Facts, base
from verifier.appendix.formulas import Formulas, typed
from verifier.appendix.identities import Discriminant, discriminant
from verifier.appendix.parameters import name_latex
from verifier.appendix.polynomials import polynomial
from verifier.appendix.verdicts import EMPTY, says_nothing, verdict
from verifier.case.case import Case, Claim, Polynomials
from verifier.errors import VerifierError
from verifier.expressions.polynomial import coefficients
from verifier.registry import PREDICATES, QUANTITIES, Predicate, Quantity
from verifier.typography.escape import Latex, tex

LETTERS = {"order": ("l",), "integer": ("a", "b"), "place": ("A", "B"), "polynomial": ("f", "g")}
SIZES = {
    "p": "the prime, characteristic of the field",
    "q": "the order of the field",
    "n": "the number of vertices",
    "N": "the length of the sequence",
    "k": "the degree of f modulo p",
    "r": "the number of distinct zeros of f in the field of p elements",
}
DISCRIMINANTS = 40


def notation_rows(
    case: Case, facts: Facts, formulas: Formulas, citations: Citations
) -> list[dict[str, Latex]]:
    """Return a row for each size, abbreviation, quantity and predicate that the case uses."""
    rows = [
        {"symbol": Latex(f"${letter}$"), "meaning": _size(meaning)}
        for letter, meaning in SIZES.items()
        if any(letter in found["known"] for found in facts.certificates)
    ]
    rows += [
        {"symbol": Latex(f"${name_latex(name)}$"), "meaning": formulas.inline(condition)}
        for name, condition in case.define.items()
    ]
    names = dict.fromkeys(base(name) for name in facts.measured())
    for name in names:
        entry = QUANTITIES.entries.get(name) or PREDICATES.entries.get(name)
        if entry is not None:
            rows.append(_entry_row(entry, formulas, citations))
    return rows


def _size(meaning: str) -> Latex:
    words = tex(meaning)
    return Latex(words.replace(" f ", " $f$ ").replace(" p", " $p$") if " p" in words else words)


def _entry_row(
    entry: Quantity | Predicate, formulas: Formulas, citations: Citations
) -> dict[str, Latex]:
    letters = _letters(entry)
    symbol = formulas.symbol(entry.name, letters)
    origin = citations.source(entry.source).code
    source = f" See {origin}." if origin else ""
    meaning = _meaning(entry)
    call = f"{entry.name}({', '.join(letters)})" if letters else entry.name
    return {
        "symbol": Latex(f"\\primewiseinline{{{symbol}}}{{{typed(call).code}}}"),
        "meaning": Latex(f"{meaning}.{source} In the case file: {typed(call).code}."),
    }


def _letters(entry: Quantity | Predicate) -> list[str]:
    """Return a letter for each argument: t for numbers of steps, else by the kind."""
    if entry.name in ("cycles", "closed_walks"):
        return ["t"]
    counts: dict[str, int] = {}
    letters: list[str] = []
    for kind in entry.arguments:
        letters.append(LETTERS[kind][counts.get(kind, 0)])
        counts[kind] = counts.get(kind, 0) + 1
    return letters


def _meaning(entry: Quantity | Predicate) -> str:
    """Return the definition as maths where there is a template for it, else in its own words."""
    name = f"appendix/meanings/{entry.name}.tex.jinja"
    if has_template(name):
        return render(name).code.strip()
    return tex(entry.definition).rstrip(".")


def hypotheses(case: Case, formulas: Formulas) -> list[dict[str, Latex]]:
    """Return each distinct `given` with the claims that ask for it."""
    asked: dict[str, list[str]] = {}
    conditions = {}
    for claim in case.claims:
        for condition in claim.given:
            conditions[condition.text] = condition
            asked.setdefault(condition.text, []).append(claim.name)
    return [
        {
            "condition": formulas.inline(conditions[text]),
            "claims": Latex(", ".join(f"\\emph{{{tex(name)}}}" for name in names)),
        }
        for text, names in asked.items()
    ]


def claim_entries(
    case: Case, summary: Mapping[str, Any], formulas: Formulas, citations: Citations
) -> list[dict[str, object]]:
    """Return each claim as it is printed: hypotheses, formula, source, verdict."""
    judged = {claim["name"]: claim for claim in summary["claims"]}
    return [_claim(claim, case, judged[claim.name], formulas, citations) for claim in case.claims]


def _claim(
    claim: Claim, case: Case, judged: Mapping[str, Any], formulas: Formulas, citations: Citations
) -> dict[str, object]:
    constant = constant_remark(claim.says.expanded)
    given = " and ".join(formulas.inline(condition).code for condition in claim.given)
    return {
        "name": claim.name,
        "given": Latex(given) if given else "",
        "formula": formulas.displayed(claim.says),
        "source": _source(claim, case, citations),
        "remark": "" if constant is None else Latex(f"Here ${constant.code}$."),
        "verdict": _verdict(judged),
    }


def _source(claim: Claim, case: Case, citations: Citations) -> Latex | str:
    if claim.source is None or claim.source not in case.sources:
        return ""
    source = case.sources[claim.source]
    words = f"{tex(source.text).rstrip('.')} " if source.bibtex else ""
    return Latex(f"{words}{citations.cite(claim.source).code}")


def _verdict(judged: Mapping[str, Any]) -> Latex:
    counts = [
        f"{judged[word]} {word}" for word in ("holds", "fails", "outside", "open") if judged[word]
    ]
    total = sum(judged[word] for word in ("holds", "fails", "outside", "open"))
    if judged["trivial"] == total and total:
        return Latex(f"{EMPTY} ({', '.join(counts)})")
    tail = f"; {says_nothing(judged['trivial'], total)}" if judged["trivial"] else ""
    warning = " (no instance meets the hypotheses, so nothing was tested)"
    outside = warning if judged["verdict"] == "outside" else ""
    return Latex(f"{verdict(judged['verdict']).code} ({', '.join(counts)}){tail}{outside}")


def discriminant_sentences(case: Case, facts: Facts) -> list[Latex]:
    """Return, for listed polynomials over Q, the primes modulo which they may not be squarefree."""
    primes = sorted(
        {int(found["known"]["p"]) for found in facts.certificates if "p" in found["known"]}
    )
    made: list[str] = []
    for parameter in case.parameters:
        if isinstance(parameter, Polynomials):
            for text, tree in zip(parameter.texts, parameter.trees, strict=True):
                sentence = _discriminant(text, tree, primes)
                made += [sentence] if sentence else []
    if not made or not facts.uses("squarefree"):
        return []
    more = len(made) - DISCRIMINANTS
    shown = " ".join(made[:DISCRIMINANTS]) + (f" And {more} more." if more > 0 else "")
    return [
        Latex(
            "Modulo a prime that divides neither the leading coefficient $a$ nor the discriminant "
            "$\\operatorname{disc}$ over $\\mathbf{Q}$ (both of the primitive integral multiple), "
            f"a polynomial keeps its degree and is squarefree. {shown}"
        )
    ]


def _discriminant(text: str, tree: Any, primes: Sequence[int]) -> str:  # noqa: ANN401 a tree
    try:
        found = discriminant(coefficients(tree, {}))
    except VerifierError:  # it contains a swept name
        return ""
    if found is None:
        return ""
    shown = polynomial(text).code
    if found.value == 0:
        return (
            f"{shown} has discriminant $0$: it is squarefree modulo no prime that keeps its degree."
        )
    values = f"$a={found.leading}$, $\\operatorname{{disc}}={found.value}$"
    return f"For {shown}: {values}, {_excluded(found, primes)}."


def _excluded(found: Discriminant, primes: Sequence[int]) -> str:
    here = [prime for prime in primes if found.leading * found.value % prime == 0]
    in_case = f"of the primes of this case, {_listed(here)}" if here else "no prime of this case"
    if found.primes is None:
        return f"excluded: {in_case}"
    if not found.primes:
        return "no prime is excluded"
    return f"excluded primes {_listed(found.primes)}; {in_case}"


def _listed(primes: Sequence[int]) -> str:
    return ", ".join(f"${prime}$" for prime in primes)
