"""Progress on standard error: a bar on a terminal, a line every ten seconds elsewhere."""

import sys
import time
from collections.abc import Callable

Progress = Callable[[int, int], None]

WIDTH = 40
SECONDS = 10


def silent(done: int, total: int) -> None:
    """Report nothing."""


def bar() -> Progress:
    """Return a reporter that redraws one line, and clears it when all is done."""
    drawn = [-1]

    def show(done: int, total: int) -> None:
        filled = WIDTH * done // max(total, 1)
        if done == total:
            sys.stderr.write("\r\x1b[K")
        elif filled != drawn[0]:
            drawn[0] = filled
            sys.stderr.write(f"\r  {'=' * filled}{' ' * (WIDTH - filled)} {done} of {total}")
        sys.stderr.flush()

    return show


def lines() -> Progress:
    """Return a reporter that prints a line every ten seconds."""
    last = [time.monotonic()]

    def show(done: int, total: int) -> None:
        if time.monotonic() - last[0] >= SECONDS and done < total:
            last[0] = time.monotonic()
            sys.stderr.write(f"primewise: {done} of {total} instances\n")

    return show
