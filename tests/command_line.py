"""What a run of the command line gave, for tests."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from toewright_cli.progress import COMPILE_NOTICE


@dataclass(frozen=True)
class Result:
    code: int
    out: str
    err: str

    @property
    def complaint(self) -> str:
        """The one line that a refusal prints; notices of long work (compiling, progress) may stand before it."""
        assert self.out == ""
        assert "Traceback" not in self.err
        lines = [line for line in self.err.splitlines() if line != COMPILE_NOTICE and not line.endswith(" ...")]
        assert len(lines) == 1, lines
        assert lines[0].startswith("toewright: ")
        return lines[0]


Cli = Callable[..., Result]
