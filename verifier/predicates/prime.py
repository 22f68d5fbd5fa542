"""Prime numbers."""

from verifier.exact.primes import is_prime
from verifier.records import Finding
from verifier.registry import predicate
from verifier.structures.subject import Subject


@predicate(
    "prime",
    definition="a is a prime number",
    source="common-practice",
    needs="nothing",
    symbol=r"{0}\text{ is prime}",
    arguments=("integer",),
)
def prime(_: Subject, number: int) -> Finding:
    """Return whether a is a prime number."""
    return Finding(is_prime(number))
