from __future__ import annotations

import pytest
from command_line import Cli, Result

from toewright_cli.app import run


@pytest.fixture
def cli(capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch) -> Cli:
    """The command line in this process, as a pipe sees it."""
    monkeypatch.delenv("COLUMNS", raising=False)

    def call(*arguments: object) -> Result:
        capsys.readouterr()
        code = run([str(a) for a in arguments])
        seen = capsys.readouterr()
        return Result(code, seen.out, seen.err)

    return call
