"""What a run of the command line gave, for tests."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass


@dataclass(frozen=True)
class Result:
    code: int
    out: str
    err: str

    @property
    def complaint(self) -> str:
        """The one line that a refusal prints."""
        assert self.out == ""
        lines = self.err.splitlines()
        assert len(lines) == 1, lines
        assert lines[0].startswith("toewright: ")
        assert "Traceback" not in self.err
        return lines[0]


Cli = Callable[..., Result]
