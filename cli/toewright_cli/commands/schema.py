"""``toewright schema``: the JSON schema of the hardpoint file, for editors."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from toewright_cli.console import print_json, warn
from toewright_cli.options import Force


def schema(
    out_file: Annotated[
        Path | None, typer.Option("--out", "-o", metavar="FILE", help="Write to a file (.json), not to stdout.")
    ] = None,
    force: Force = False,
) -> None:
    """Print the JSON schema of the hardpoint file, for completion and checks in an editor."""
    import json

    from toewright.model.schema import json_schema
    from toewright.model.writing import write_text
    from toewright_cli.outputs import check_out

    if out_file is None:
        print_json(json_schema())
        return
    check_out(out_file, force, (".json",))
    write_text(out_file, json.dumps(json_schema(), indent=2) + "\n", force=force)
    warn(f"wrote {out_file}")
