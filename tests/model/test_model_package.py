from __future__ import annotations

import subprocess
import sys

import pytest

import toewright.model as model


def test_every_name_is_there() -> None:
    for name in model.__all__:
        assert getattr(model, name) is not None
    assert sorted(model.__all__) == sorted(model._HOMES)
    with pytest.raises(AttributeError, match="no attribute 'lod'"):
        _ = model.lod


def test_import_is_light() -> None:
    code = "import sys, toewright.model; print([m for m in ('pydantic', 'tomlkit', 'numpy', 'numba', 'scipy') if m in sys.modules])"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"
