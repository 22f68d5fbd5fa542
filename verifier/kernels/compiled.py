"""How inner loops are compiled; importing this file imports numba, which costs 0.3 s."""

from collections.abc import Callable
from typing import ParamSpec, TypeVar, cast

from numba import njit

P = ParamSpec("P")
R = TypeVar("R")


def compiled(function: Callable[P, R]) -> Callable[P, R]:
    """Compile a function at its first call, and keep the result on disk where that is possible.

    Integer arithmetic inside wraps at 64 bits or less: every such function states its bounds.
    """
    try:
        return cast("Callable[P, R]", njit(cache=True)(function))
    except RuntimeError:  # no folder for the cache can be written
        return cast("Callable[P, R]", njit(function))
