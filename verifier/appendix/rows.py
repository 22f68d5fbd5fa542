"""The certificate table: one row an instance and claim, all of them or the telling ones."""

import hashlib
from collections.abc import Callable, Mapping, Sequence
from typing import Any

from verifier.appendix.facts import Certificate, base
from verifier.appendix.parameters import place
from verifier.appendix.values import value
from verifier.appendix.verdicts import verdict
from verifier.case.case import Case
from verifier.certificate import canonical_text
from verifier.typography.escape import Latex, tex

MOST = 5000
EXTREMES = 50
BAD = 1000
DIGEST = 12


def line_digest(found: Certificate) -> str:
    """Return the first 12 hexadecimal digits of the SHA-256 of a line with its line feed."""
    line = canonical_text(dict(found)) + "\n"
    return hashlib.sha256(line.encode("utf-8")).hexdigest()[:DIGEST]


def certificate_tables(
    case: Case,
    summary: Mapping[str, Any],
    certificates: Sequence[Certificate],
    typed: Callable[[str], Latex],
    *,
    all_rows: bool,
) -> list[dict[str, object]]:
    """Return one table a claim: its rows, and what was left out.

    Up to 5,000 rows in all, every row is there. Beyond, unless `all_rows`: failures and open ones
    (the first and last 500 of each claim), the tightest instance, the first and last 50 rows.
    """
    complete = all_rows or len(case.claims) * len(certificates) <= MOST
    made: list[dict[str, object]] = []
    digests = [line_digest(found) for found in certificates]
    for number, claim in enumerate(summary["claims"], start=1):
        indices = list(range(len(certificates))) if complete else _telling(claim, certificates)
        rows = [
            _row(certificates[index], index, claim["name"], digests[index], typed)
            for index in indices
        ]
        made.append(
            {
                "number": number,
                "name": claim["name"],
                "rows": rows,
                "joined": any("parts" in found["claims"][claim["name"]] for found in certificates),
                "shown": len(rows),
                "total": len(certificates),
                "omitted": len(certificates) - len(rows),
            }
        )
    return made


def measured_table(
    case: Case,
    certificates: Sequence[Certificate],
    typed: Callable[[str], Latex],
    *,
    all_rows: bool,
) -> dict[str, object] | None:
    """Return what the case only measures, one row an instance; None if it asks for nothing."""
    if not case.measure:
        return None
    asked = {base(condition.text) for condition in case.measure}
    kept = certificates if all_rows else certificates[:MOST]
    rows = [
        {
            "line": index + 1,
            "at": place(found["parameters"]),
            "found": _values(found, asked, typed),
            "digest": Latex(line_digest(found)),
        }
        for index, found in enumerate(kept)
    ]
    return {
        "rows": rows,
        "shown": len(kept),
        "total": len(certificates),
        "omitted": len(certificates) - len(kept),
    }


def _values(found: Certificate, asked: set[str], typed: Callable[[str], Latex]) -> Latex:
    shown = [
        f"{typed(name).code} {value(measured).code}"
        for name, measured in found["quantities"].items()
        if base(name) in asked
    ]
    return Latex("; ".join(shown) or "--")


def widths(certificates: Sequence[Certificate], *, wide_verdicts: bool) -> dict[str, Latex]:
    """Return the widths of the columns of the certificate table, as parts of the line."""
    longest = max((len(_flat(found["parameters"])) for found in certificates), default=0)
    at = 14 if longest < 12 else 22 if longest < 40 else 28
    verdicts = 17 if wide_verdicts else 10
    side = (71 - at - verdicts) // 2
    return {
        "at": Latex(f"0.{at}"),
        "side": Latex(f"0.{side}"),
        "both": Latex(f"0.{2 * side + 2}"),
        "verdict": Latex(f"0.{verdicts}"),
    }


def _flat(parameters: Mapping[str, str]) -> str:
    return ", ".join(f"{name} = {text}" for name, text in parameters.items())


def _telling(claim: Mapping[str, Any], certificates: Sequence[Certificate]) -> list[int]:
    name = claim["name"]
    bad = [
        index
        for index, found in enumerate(certificates)
        if found["claims"][name]["verdict"] in ("fails", "open")
    ]
    kept = set(bad[: BAD // 2]) | set(bad[-BAD // 2 :])
    kept |= set(range(EXTREMES)) | set(range(len(certificates) - EXTREMES, len(certificates)))
    if claim["tightest"] is not None:
        at = claim["tightest"]["parameters"]
        kept |= {index for index, found in enumerate(certificates) if found["parameters"] == at}
    return sorted(index for index in kept if 0 <= index < len(certificates))


def _row(
    found: Certificate, index: int, name: str, digest: str, typed: Callable[[str], Latex]
) -> dict[str, object]:
    judged = found["claims"][name]
    left, right = _sides(judged, typed)
    return {
        "line": index + 1,
        "at": place(found["parameters"]),
        "left": left,
        "right": right,
        "verdict": _verdict(judged),
        "digest": Latex(digest),
    }


def _sides(judged: Mapping[str, Any], typed: Callable[[str], Latex]) -> tuple[Latex, Latex]:
    if "parts" in judged:
        shown = [f"{typed(part['says']).code}: {tex(part['verdict'])}" for part in judged["parts"]]
        return Latex("; ".join(shown) or "--"), Latex("--")
    return value(judged.get("left")), value(judged.get("right"))


def _verdict(judged: Mapping[str, Any]) -> Latex:
    if judged["trivial"]:
        return Latex(r"holds\textsuperscript{\textdegree}")
    return verdict(judged["verdict"])
