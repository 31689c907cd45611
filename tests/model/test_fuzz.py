"""Spoilt files: reading them gives a valid axle or one sentence, never anything else."""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import TypeVar

import numpy as np
from corners import SAMPLES
from files_for_tests import file_text
from hypothesis import given, settings
from hypothesis import strategies as st

from toewright.model import POINT_NAMES, InputError, dumps, loads, set_points
from toewright.model.pointtable import read_point_table
from toewright.model.starters import STARTERS, starter_text

TEXTS = [path.read_text(encoding="utf-8") for path in SAMPLES]
TEXTS += [starter_text(kind) for kind in STARTERS]
TEXTS += [file_text(right=True), file_text("strut", "sae-j670", "in")]
TABLE = "point;x (mm);y (mm);z (mm)\n" + "\n".join(
    f"left {name};{i}1,5;{i}2;-{i}3,25" for i, name in enumerate(POINT_NAMES["strut"])
)

VALUES = (
    "nan inf -inf 0 -0.0 1e308 -1e308 5e-324 1e6 -1 true false '' [] {} [[]] [1] [1,2,3] [nan,0,0] 2026-01-01 07:32:00 \"x\" '''\n''' "
    f"0x7f 1_000 99999999999999999999999999 {'9' * 400} {'9' * 5000} \"\\u0000\" [1,2,'3'] {{x=1}} = ] ["
).split(" ")
CHARACTERS = "[]{}\"'=#.,-+_eE09 \n\r\t\\\x00\x7f\u2212é\U0001f697"


def replace_value(text: str, draw: Callable[[st.SearchStrategy[int]], int], value: str) -> str:
    spots = list(re.finditer(r"= (.*)$", text, re.MULTILINE))
    spot = spots[draw(st.integers(0, len(spots) - 1))]
    return text[: spot.start(1)] + value + text[spot.end(1) :]


def replace_number(text: str, draw: Callable[[st.SearchStrategy[int]], int], value: str) -> str:
    spots = list(re.finditer(r"[-+]?\d+(\.\d+)?", text))
    spot = spots[draw(st.integers(0, len(spots) - 1))]
    return text[: spot.start()] + value + text[spot.end() :]


@st.composite
def spoilt(draw: st.DrawFn, texts: list[str]) -> str:
    text = draw(st.sampled_from(texts))
    for _ in range(draw(st.integers(1, 3))):
        lines = text.split("\n")
        at = draw(st.integers(0, len(text) - 1)) if text else 0
        row = draw(st.integers(0, len(lines) - 1))
        match draw(st.integers(0, 8)):
            case 0:
                text = "\n".join(lines[:row] + lines[row + 1 :])
            case 1:
                text = "\n".join(lines[:row] + [lines[row]] + lines[row:])
            case 2:
                text = text[:at] + draw(st.sampled_from(CHARACTERS)) + text[at + 1 :]
            case 3:
                text = text[:at] + draw(st.text(max_size=4)) + text[at:]
            case 4:
                text = text[:at]
            case 5 if re.search("= .", text):
                text = replace_value(text, draw, draw(st.sampled_from(VALUES)))
            case 6 if re.search(r"\d", text):
                text = replace_number(text, draw, draw(st.sampled_from(VALUES)))
            case 7 if re.search(r"\d", text):
                text = replace_number(text, draw, repr(draw(st.floats())))
            case _:
                other = draw(st.integers(0, len(lines) - 1))
                lines[row], lines[other] = lines[other], lines[row]
                text = "\n".join(lines)
    return text


Read = TypeVar("Read")


def attempt(read: Callable[[], Read]) -> tuple[Read | None, str]:
    """What was read, or the sentence of the refusal."""
    try:
        return read(), ""
    except InputError as error:
        return None, str(error)


@settings(max_examples=1500)
@given(text=spoilt(TEXTS))
def test_a_spoilt_file_is_an_axle_or_one_sentence(text: str) -> None:
    axle, sentence = attempt(lambda: loads(text, file="spoilt.toml"))
    if axle is None:
        assert sentence.startswith("spoilt.toml: ")
        assert sentence.isprintable(), sentence
        assert len(sentence) < 600
        return
    for corner in (axle.left, axle.right):
        assert set(corner.points) == set(POINT_NAMES[corner.kind])
        for name, point in corner.points.items():
            assert point.shape == (3,)
            assert np.all(np.isfinite(point))
            assert name == "tie_rod_inner" or point[1] * corner.sign >= 0.0
    assert 0.0 < axle.wheel.loaded_radius < 2000.0
    loads(dumps(axle))
    centre = axle.left.points["wheel_centre"]
    np.testing.assert_allclose(
        loads(set_points(text, {("left", "wheel_centre"): centre + 1.0})).left.points["wheel_centre"],
        centre + 1.0,
        atol=1e-8,
    )


@settings(max_examples=1000)
@given(text=spoilt([TABLE, TABLE.replace(";", "\t").replace(",", "."), TABLE.replace(";", " ").replace("left ", "")]))
def test_a_spoilt_table_is_numbers_or_one_sentence(text: str) -> None:
    table, sentence = attempt(lambda: read_point_table(text, "spoilt.csv"))
    if table is None:
        assert sentence.startswith("spoilt.csv: ")
        assert sentence.isprintable(), sentence
        return
    assert table.values.shape == (len(table.names), 3)
    assert np.all(np.isfinite(table.values))
    assert len(set(table.names)) == len(table.names)
