"""Proof sketches, chosen by what a case uses; every hypothesis is held against the certificates."""

from collections.abc import Callable, Iterator, Sequence

from verifier.appendix.environment import render
from verifier.appendix.facts import (
    Certificate,
    Facts,
    is_even,
    is_odd_symmetric,
    is_symmetric,
)
from verifier.appendix.identities import printed
from verifier.appendix.parameters import places
from verifier.typography.escape import Latex

Cite = Callable[..., Latex]

AGREEMENTS = ("agreement_sum",)
CODEGREES = ("codegree_sum", "codegree_min", "codegree_max")
DEGREES = ("edges", "density", "degree_min", "degree_max", "balance")
WALKS = ("cycles", "closed_walks")
COMPLETE = ("complete_sum",)
SHIFTED = ("shifted_sum",)
PARTIAL = ("incomplete_sum", "cyclic_incomplete_sum", "window_sum")
ORDERED = ("correlation", "well_distribution")


def sketches(facts: Facts, cite: Cite) -> list[Latex]:
    """Return the paragraphs that apply to the case, in the order in which they lean on each other.

    Raises
    ------
    IdentityError
        If an algebraic identity of a paragraph that applies is false.
    """
    return [
        Latex(render(f"appendix/sketches/{name}.tex.jinja", **values).code.strip())
        for name, values in _chosen(facts, cite)
    ]


Chosen = Iterator[tuple[str, dict[str, object]]]


def _chosen(facts: Facts, cite: Cite) -> Chosen:
    if not facts.built:
        return
    shared: dict[str, object] = {"cite": cite, "identity": printed}
    if facts.all_of("graph", "circulant"):
        yield from _circulant(facts, shared)
    elif facts.uses(*AGREEMENTS, *CODEGREES):
        yield "agreement-matrix", shared
    if facts.uses(*WALKS):
        yield "four-cycles", {**shared, "regular": facts.all_of("graph", "circulant")}
    if facts.all_of("rule", "legendre"):
        yield from _character_sums(facts, shared)
    if _is_paley(facts) and facts.uses(*AGREEMENTS, *CODEGREES, *WALKS):
        yield "paley", shared


def _circulant(facts: Facts, shared: dict[str, object]) -> Chosen:
    yield "symmetry", {**shared, **_symmetry(facts)}
    if facts.uses(*DEGREES, *CODEGREES, *WALKS):
        yield "degree", shared
    if facts.uses(*AGREEMENTS, *CODEGREES):
        yield "agreement", shared
    if facts.uses(*CODEGREES):
        yield "codegree", shared
    if facts.uses(*AGREEMENTS) and "correlation(2)" in facts.measured():
        yield "correlation-agreement", shared


def _symmetry(facts: Facts) -> dict[str, object]:
    """Return at which instances which reason makes the row symmetric."""
    mirrored = facts.all_of("symmetrise", "mirror")
    by_argument = facts.full_period() and not mirrored
    even = facts.where(lambda found: by_argument and is_even(found))
    odd = facts.where(lambda found: by_argument and is_odd_symmetric(found))
    reasoned = {id(found) for found in (*even, *odd)}
    neither = facts.where(
        lambda found: is_symmetric(found) and not mirrored and id(found) not in reasoned
    )
    unsymmetric = [found for found in facts.built if found["quantities"].get("symmetric") is False]
    groups = {"even": even, "odd": odd, "neither": neither, "unsymmetric": unsymmetric}
    values: dict[str, object] = {"mirrored": mirrored}
    for name, found in groups.items():
        values[name] = bool(found)
        values[f"{name}_at"] = _at(found, facts)
    return values


def _at(found: Sequence[Certificate], facts: Facts) -> Latex:
    """Return `At all 12 instances`, or where, as the start of a sentence."""
    if len(found) == len(facts.built):
        return Latex("Throughout,")
    named = places([one["parameters"] for one in found], most=2)
    return Latex(f"At {len(found)} of {len(facts.built)} instances ({named})")


def _character_sums(facts: Facts, shared: dict[str, object]) -> Chosen:
    shifts = facts.uses(*SHIFTED, *ORDERED) or (
        facts.uses(*AGREEMENTS) and facts.all_of("graph", "circulant") and facts.full_period()
    )
    if not (shifts or facts.uses(*COMPLETE, *PARTIAL)):
        return
    yield "weil", {**shared, "hypotheses": _hypotheses(facts)}
    if facts.uses(*COMPLETE):
        yield "complete", shared
    if shifts:
        yield "shifts", shared
    if facts.uses(*AGREEMENTS) and facts.all_of("graph", "circulant") and facts.full_period():
        yield "weil-agreement", shared
    if facts.within_period() and facts.uses(*PARTIAL, *ORDERED):
        yield (
            "incomplete",
            {
                **shared,
                "correlation": facts.uses("correlation"),
                "distribution": facts.uses("well_distribution"),
                "order_three": "correlation(3)" in facts.measured(),
            },
        )


def _hypotheses(facts: Facts) -> Latex:
    """Return where the degree lies in 1..p-1 and f is squarefree, as the certificates have it."""
    built = facts.built
    degree = facts.where(lambda one: 0 < int(one["known"]["k"]) < int(one["known"]["p"]))
    made = [
        f"$p$ is prime, by the certificates {_share(built, facts)}",
        f"$0<k<p$ {_share(degree, facts)}",
    ]
    judged = facts.where(lambda one: isinstance(one["quantities"].get("squarefree(f)"), bool))
    if not judged:
        return Latex(
            f"{'; '.join(made)}. That $f$ is squarefree modulo $p$ is not among the predicates of "
            "this case: what follows speaks only of those $p$ for which it is."
        )
    free = [one for one in judged if one["quantities"]["squarefree(f)"]]
    made.append(f"$f$ is squarefree modulo $p$ {_share(free, facts)}")
    failing = [one for one in judged if not one["quantities"]["squarefree(f)"]]
    if not failing:
        return Latex(f"{'; '.join(made)}.")
    named = places([one["parameters"] for one in failing])
    return Latex(f"{'; '.join(made)}. It is not at {named}; there the theorem is not used.")


def _share(found: Sequence[Certificate], facts: Facts) -> str:
    if len(found) == len(facts.built):
        return f"at all {len(found)} instances" if len(found) > 1 else "at the one instance"
    return f"at {len(found)} of {len(facts.built)} instances"


def _is_paley(facts: Facts) -> bool:
    return (
        facts.all_of("rule", "legendre")
        and facts.all_of("graph", "circulant")
        and facts.all_of("polynomial", "x")
        and facts.full_period()
        and all(int(found["known"]["p"]) % 4 == 1 for found in facts.built)
    )
