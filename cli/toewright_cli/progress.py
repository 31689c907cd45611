"""Progress on stderr, only for work that takes over a second."""

from __future__ import annotations

import threading
from collections.abc import Callable, Iterator
from contextlib import contextmanager

from toewright_cli.console import err, warn

PATIENCE = 1.0
"""Seconds of silence before progress is shown."""

COMPILE_NOTICE = "compiling the solver for this machine, once (about 10 s); later runs start at once"


def notice_compilation() -> None:
    """Say that the kernels are being compiled, if they are."""
    from toewright.kinematics.cache import kernels_cached

    if not kernels_cached():
        warn(COMPILE_NOTICE)


@contextmanager
def working(what: str, total: int | None = None) -> Iterator[Callable[[int], None]]:
    """Show on stderr that work goes on, from PATIENCE seconds on; gone from a terminal when it ends, one line when piped.

    Args:
        what: the work, such as ``solving 882 positions``.
        total: number of steps when they are counted; None shows elapsed time only.

    Yields:
        A function to call with the number of steps just done.
    """
    from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn, TimeElapsedColumn

    console = err()
    columns = [TextColumn("{task.description}"), *([] if total is None else [BarColumn(24), MofNCompleteColumn()])]
    progress = Progress(*columns, TimeElapsedColumn(), console=console, transient=True)
    task = progress.add_task(what, total=total)

    def show() -> None:
        if console.is_terminal:
            progress.start()
        else:
            warn(f"{what} ...")

    timer = threading.Timer(PATIENCE, show)
    timer.daemon = True
    timer.start()
    try:
        yield lambda count: progress.advance(task, count)
    finally:
        timer.cancel()
        timer.join()
        if progress.live.is_started:
            progress.stop()
