from __future__ import annotations

import json
from pathlib import Path

from command_line import Cli

from toewright.model import json_schema


def test_on_stdout_and_in_a_file(cli: Cli, tmp_path: Path) -> None:
    shown = cli("schema")
    assert (shown.code, shown.err) == (0, "")
    assert json.loads(shown.out) == json_schema()
    path = tmp_path / "schema.json"
    written = cli("schema", "-o", path)
    assert (written.code, written.out) == (0, "")
    assert str(path) in written.err
    assert json.loads(path.read_text(encoding="utf-8")) == json_schema()
    again = cli("schema", "-o", path)
    assert again.code == 2
    assert "exists already" in again.complaint
    wrong = cli("schema", "-o", tmp_path / "schema.toml")
    assert wrong.code == 2
    assert "use .json" in wrong.complaint
    assert list(tmp_path.iterdir()) == [path]
