"""Progress on stderr, only for work that takes over a second."""

from __future__ import annotations

import time
from collections.abc import Iterator
from contextlib import contextmanager

from toewright_cli.console import err

PATIENCE = 1.0
"""Seconds of silence before progress is shown."""

COMPILE_NOTICE = "compiling the solver for this machine, once (about 10 s); later runs start at once"


def notice_compilation() -> None:
    """Say that the kernels are being compiled, if they are."""
    from toewright.kinematics.cache import kernels_cached

    if not kernels_cached():
        err().print(COMPILE_NOTICE, markup=False, soft_wrap=True)


class Ticker:
    """Counts steps of a long piece of work and shows them after PATIENCE seconds."""

    def __init__(self, what: str, total: int) -> None:
        self.what, self.total, self.done = what, total, 0
        self.started = self.shown = time.monotonic()
        self.visible = False

    def step(self, count: int = 1) -> None:
        """Count ``count`` more as done."""
        self.done += count
        now = time.monotonic()
        if now - self.started < PATIENCE or now - self.shown < 0.2:
            return
        self.shown = now
        console = err()
        share = 100 * self.done // max(1, self.total)
        line = f"{self.what}: {self.done} of {self.total} ({share} %)"
        if console.is_terminal:
            self.visible = True
            console.print(f"\r{line}", end="", markup=False)
        elif not self.visible or self.done >= self.total:
            self.visible = True
            console.print(line, markup=False)

    def close(self) -> None:
        """End the line."""
        if self.visible and err().is_terminal:
            err().print("")


@contextmanager
def ticker(what: str, total: int) -> Iterator[Ticker]:
    """A Ticker that is closed whatever happens."""
    made = Ticker(what, total)
    try:
        yield made
    finally:
        made.close()
