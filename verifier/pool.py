"""Certify many instances, in one process or in several, in one fixed order."""

import os
import signal
from collections.abc import Iterator, Sequence
from concurrent.futures import Future, ProcessPoolExecutor
from concurrent.futures.process import BrokenProcessPool
from itertools import islice
from multiprocessing import get_all_start_methods, get_context
from typing import Any

from verifier import catalogue
from verifier.case.combinations import Combination
from verifier.errors import UndecidedError, VerifierError
from verifier.exact.decide import compare
from verifier.exact.nodes import Real
from verifier.instance.certify import Certified, certify
from verifier.plan import Plan
from verifier.progress import Progress
from verifier.records import Sizes
from verifier.registry import QUANTITIES

OVERHEAD = 2_000_000  # steps that an instance costs beyond its quantities
WORTH_WORKERS = 1_000_000_000  # steps below which starting workers costs more than they save
CHUNK = 16
AHEAD = 4  # chunks that may be in flight for each worker

Batch = Sequence[tuple[int, Combination]]

_plans: list[Plan] = []  # the plan of a worker process, set once when it starts


def certify_all(
    plan: Plan, combinations: Sequence[Combination], jobs: int, progress: Progress
) -> tuple[list[dict[str, Any]], dict[str, int]]:
    """Certify every combination.

    Returns
    -------
    tuple
        The certificates in order; for each claim the index of the instance with the largest
        ratio, the first of equals. Both do not depend on the number of jobs.
    """
    certificates: list[dict[str, Any]] = []
    tightest: dict[str, tuple[Real, int]] = {}
    for certificate, ratios in _certified(plan, combinations, jobs):
        for name, ratio in ratios.items():
            if name not in tightest or _exceeds(ratio, tightest[name][0]):
                tightest[name] = ratio, certificate["index"]
        certificates.append(certificate)
        progress(len(certificates), len(combinations))
    return certificates, {name: index for name, (_, index) in tightest.items()}


def _exceeds(ratio: Real, largest: Real) -> bool:
    """Return whether `ratio` is larger, by exact comparison; undecided counts as equal."""
    try:
        return compare(ratio, largest) > 0
    except UndecidedError:
        return False


def _certified(plan: Plan, combinations: Sequence[Combination], jobs: int) -> Iterator[Certified]:
    numbered = list(enumerate(combinations))
    work = _steps(plan, combinations)
    if jobs == 1 or len(numbered) == 1 or work < WORTH_WORKERS:
        for index, combination in numbered:
            yield certify(plan, combination, index)
        return
    heavy = work // len(numbered) > WORTH_WORKERS // CHUNK
    size = 1 if heavy else max(1, min(CHUNK, len(numbered) // (4 * jobs)))
    batches = [numbered[i : i + size] for i in range(0, len(numbered), size)]
    yield from _in_pool(plan, batches, min(jobs, len(batches)))


def _steps(plan: Plan, combinations: Sequence[Combination]) -> int:
    """Return a rough number of steps of all instances, for the choice of workers alone."""
    entries = [QUANTITIES.entries[name] for name, _ in plan.measured if name in QUANTITIES.entries]
    total = 0
    for combination in combinations:
        size = max([combination.p or 0, *combination.numbers.values()])
        costs = [
            entry.cost(Sizes(size, size, size), *(2 for _ in entry.arguments)) for entry in entries
        ]
        total += OVERHEAD + sum(cost.steps for cost in costs)
    return total


def _in_pool(plan: Plan, batches: Sequence[Batch], jobs: int) -> Iterator[Certified]:
    method = "fork" if "fork" in get_all_start_methods() else "spawn"
    with ProcessPoolExecutor(jobs, get_context(method), _begin, (plan,)) as pool:
        try:
            waiting: list[Future[list[Certified]]] = []
            rest = iter(batches)
            waiting.extend(
                pool.submit(_certify_batch, batch) for batch in islice(rest, AHEAD * jobs)
            )
            while waiting:
                yield from waiting.pop(0).result()
                waiting.extend(pool.submit(_certify_batch, batch) for batch in islice(rest, 1))
        except BrokenProcessPool as problem:
            raise VerifierError(
                "a worker process died, perhaps for want of memory; nothing was written"
            ) from problem
        finally:
            pool.shutdown(wait=True, cancel_futures=True)


def _begin(plan: Plan) -> None:
    """Prepare a worker: interrupts are the parent's business."""
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    os.environ.setdefault("NUMBA_NUM_THREADS", "1")
    catalogue.load()
    _plans[:] = [plan]


def _certify_batch(batch: Batch) -> list[Certified]:
    return [certify(_plans[0], combination, index) for index, combination in batch]
