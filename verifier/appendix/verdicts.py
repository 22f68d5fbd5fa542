"""Verdicts in words: the summary of claims, the tightest instances, failures with witnesses."""

import re
from collections.abc import Callable, Mapping, Sequence
from typing import Any

from verifier.appendix.facts import Certificate, base
from verifier.appendix.parameters import place
from verifier.appendix.values import short, value
from verifier.case.case import Case, Condition
from verifier.registry import PREDICATES, QUANTITIES
from verifier.typography.escape import Latex, tex

MARKED = {"fails": r"\primewisefails{}", "open": r"\primewiseopen{}"}
EMPTY = "holds, but says nothing here: the bound exceeds the trivial maximum"
SHOWN = 40
NAME = re.compile(r"[A-Za-z][A-Za-z0-9_]*")

Typed = Callable[[str], Latex]


def verdict(word: str) -> Latex:
    """Return a verdict with its sign: a filled square where it fails, a hollow one where open."""
    return Latex(MARKED.get(word, tex(word)))


def summary_rows(summary: Mapping[str, Any]) -> list[dict[str, object]]:
    """Return one row a claim: its verdict, counts, and the tightest instance."""
    return [_summary_row(number, claim) for number, claim in enumerate(summary["claims"], start=1)]


def _summary_row(number: int, claim: Mapping[str, Any]) -> dict[str, object]:
    counts = {word: claim[word] for word in ("holds", "fails", "outside", "open")}
    total = sum(counts.values())
    tightest = claim["tightest"]
    return {
        **counts,
        "number": number,
        "name": claim["name"],
        "verdict": _claim_verdict(claim, total),
        "total": total,
        "ratio": Latex("--") if tightest is None else short(tightest["ratio"]),
        "at": "" if tightest is None else place(tightest["parameters"]),
    }


def says_nothing(count: int, total: int) -> str:
    """Return at how many instances a claim holds and says nothing."""
    return f"at {count} of {total} instances it {EMPTY}"


def _claim_verdict(claim: Mapping[str, Any], total: int) -> Latex:
    if not claim["trivial"]:
        return verdict(claim["verdict"])
    if claim["trivial"] == total:
        return Latex(EMPTY)
    return Latex(f"{verdict(claim['verdict']).code}; {says_nothing(claim['trivial'], total)}")


def tightest_sentences(
    summary: Mapping[str, Any], certificates: Sequence[Certificate]
) -> list[Latex]:
    """Return a sentence for each claim that has a ratio somewhere."""
    made: list[Latex] = []
    for claim in summary["claims"]:
        tightest = claim["tightest"]
        if tightest is None:
            continue
        found = next(c for c in certificates if c["parameters"] == tightest["parameters"])
        judged = found["claims"][claim["name"]]
        made.append(
            Latex(
                f"\\emph{{{tex(claim['name'])}}}: at {place(tightest['parameters']).code} the "
                f"sides are {value(judged['left']).code} and {value(judged['right']).code}, with "
                f"ratio {short(tightest['ratio']).code}."
            )
        )
    return made


def failure_groups(
    case: Case, summary: Mapping[str, Any], certificates: Sequence[Certificate], typed: Typed
) -> list[dict[str, object]]:
    """Return, for each claim that fails or is open somewhere, a heading and its sentences."""
    spoken = {claim.name: mentioned(claim.says, case) for claim in case.claims}
    groups: list[dict[str, object]] = []
    for claim in summary["claims"]:
        name = claim["name"]
        if not claim["fails"] and not claim["open"]:
            continue
        marked = [c for c in certificates if c["claims"][name]["verdict"] in MARKED]
        kept = marked if len(marked) <= SHOWN else [*marked[: SHOWN // 2], *marked[-SHOWN // 2 :]]
        groups.append(
            {
                "heading": _heading(claim),
                "sentences": [failure_sentence(found, name, spoken[name], typed) for found in kept],
                "omitted": len(marked) - len(kept),
            }
        )
    return groups


def _heading(claim: Mapping[str, Any]) -> Latex:
    pieces = [f"\\emph{{{tex(claim['name'])}}}"]
    if claim["fails"]:
        pieces.append(f"fails at {_instances(claim['fails'])}")
    if claim["open"]:
        pieces.append(f"is open at {_instances(claim['open'])}")
    beyond = claim["failures"]["holds_from"]
    tail = f"; in this range it holds from ${beyond}$ on" if beyond and claim["fails"] else ""
    return Latex(f"{pieces[0]} {' and '.join(pieces[1:])}{tail}.")


def _instances(count: int) -> str:
    return "1 instance" if count == 1 else f"{count} instances"


def mentioned(condition: Condition, case: Case) -> frozenset[str]:
    """Return the names that an expression uses, through abbreviations too."""
    names = set(NAME.findall(condition.text))
    for name, meaning in reversed(list(case.define.items())):
        if name in names:
            names |= set(NAME.findall(meaning.text))
    return frozenset(names)


def failure_sentence(found: Certificate, name: str, spoken: frozenset[str], typed: Typed) -> Latex:
    """Return why a claim fails or is open at an instance, with the witnesses that show it."""
    judged = found["claims"][name]
    sign = verdict(judged["verdict"]).code
    why = _why(judged, typed)
    where = place(found["parameters"]).code
    witnesses = _witnesses(found, spoken, typed) if judged["verdict"] == "fails" else ""
    return Latex(f"{sign} at {where}: {why}.{witnesses}")


def _why(judged: Mapping[str, Any], typed: Typed) -> str:
    if "reason" in judged:
        return tex(judged["reason"])
    if judged.get("left") is not None:
        return (
            f"the left side is {value(judged['left']).code}, the right side "
            f"{value(judged['right']).code}"
        )
    parts = [part for part in judged.get("parts", []) if part["verdict"] != "holds"]
    return (
        "; ".join(_part(part, typed) for part in parts) or "the parts hold, their junction does not"
    )


def _part(part: Mapping[str, Any], typed: Typed) -> str:
    says = f"{typed(part['says']).code} {tex(part['verdict'])}"
    if part.get("left") is None:
        return says
    return f"{says} with sides {value(part['left']).code} and {value(part['right']).code}"


def _witnesses(found: Certificate, spoken: frozenset[str], typed: Typed) -> str:
    made = [
        _witness(quantity, found["quantities"].get(quantity), witness, typed)
        for quantity, witness in found["witnesses"].items()
        if base(quantity) in spoken
    ]
    return f" {' '.join(made)}" if made else ""


def _witness(name: str, measured: object, witness: Sequence[str], typed: Typed) -> str:
    names = _witness_names(name, len(witness))
    shown = ", ".join(
        f"${component}={text}$" for component, text in zip(names, witness, strict=True)
    )
    shown_name = typed(name).code
    if isinstance(measured, bool):
        return f"That {shown_name} is {'true' if measured else 'false'} is seen at {shown}."
    if isinstance(measured, str):
        return f"The value {value(measured).code} of {shown_name} is attained at {shown}."
    return f"A witness for {shown_name} is {shown}."


def _witness_names(name: str, length: int) -> list[str]:
    quantity = QUANTITIES.entries.get(base(name))
    predicate = PREDICATES.entries.get(base(name))
    entry = quantity or predicate
    names = list(entry.witness) if entry is not None else []
    if "..." in names:
        names = _repeated(names, length)
    if len(names) != length:
        return [f"w_{{{i}}}" for i in range(1, length + 1)]
    return [_component(text) for text in names]


def _repeated(names: list[str], length: int) -> list[str]:
    at = names.index("...")
    before, after = names[: at - 1], names[at + 1 :]
    letter = names[at - 1].partition("_")[0]
    count = length - len(before) - len(after)
    return [*before, *(f"{letter}_{i}" for i in range(1, count + 1)), *after]


def _component(text: str) -> str:
    letter, _, index = text.partition("_")
    return f"{tex(letter)}_{{{tex(index)}}}" if index else tex(letter)
