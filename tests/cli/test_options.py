from __future__ import annotations

import math
from itertools import pairwise

import pytest
from hypothesis import assume, example, given
from hypothesis import strategies as st

from toewright.model.errors import InputError
from toewright_cli.options import LARGEST_COUNT, SideChoice, parse_list


@pytest.mark.parametrize(
    ("text", "values"),
    [
        ("-25:25:3", [-25.0, 0.0, 25.0]),
        ("-25:25:11", [-25.0, -20.0, -15.0, -10.0, -5.0, 0.0, 5.0, 10.0, 15.0, 20.0, 25.0]),
        ("3:3:1", [3.0]),
        (" -1 : 1 : 2 ", [-1.0, 1.0]),
        ("5", [5.0]),
        ("-5", [-5.0]),
        ("-5,-1.5,0,2e1", [-5.0, -1.5, 0.0, 20.0]),
        ("-0.3:0.3:7", [-0.3, -0.2, -0.1, 0.0, 0.1, 0.2, 0.3]),
    ],
)
def test_a_list_is_read(text: str, values: list[float]) -> None:
    assert parse_list(text, "--travel") == pytest.approx(values, abs=1e-15)


def test_no_list_stays_none() -> None:
    assert parse_list(None, "--rack") is None


def test_the_design_position_is_hit_exactly() -> None:
    assert 0.0 in (parse_list("-0.3:0.3:21", "--travel") or [])


@pytest.mark.parametrize(
    ("text", "why"),
    [
        ("", "empty"),
        ("   ", "empty"),
        (",", "not a number"),
        ("1,,2", "not a number"),
        ("1,2,", "not a number"),
        ("x", "'x' is not a number"),
        ("nan", "not a number"),
        ("inf", "not a number"),
        ("1;2", "not a number"),
        ("2,1", "1 after 2 does not ascend"),
        ("1,1", "does not ascend"),
        ("5:1:3", "5 to 1 does not ascend"),
        ("1:1:2", "does not ascend"),
        ("1:2", "2 parts"),
        ("1:2:3:4", "4 parts"),
        ("1:2:0", "n is '0'"),
        ("1:2:-3", "n is '-3'"),
        ("1:2:2.5", "n is '2.5'"),
        ("1:2:", "n is ''"),
        ("1:2:\u00b2", "n is '\u00b2'"),
        ("1:2:99999999999999999999", "n is"),
        (f"1:2:{LARGEST_COUNT + 1}", "n is"),
        ("1:2:1", "can't span"),
        ("0:5e-324:9", "does not ascend"),
        ("1e300", "more than any car has"),
        ("-9000:9000:3", "more than any car has"),
    ],
)
def test_a_bad_list_is_refused_with_option_value_and_reason(text: str, why: str) -> None:
    with pytest.raises(InputError) as caught:
        parse_list(text, "--travel")
    sentence = str(caught.value)
    assert sentence.startswith("--travel")
    assert text.strip() in sentence
    assert why in sentence
    assert "\n" not in sentence


@given(
    st.floats(-2000, 2000, allow_subnormal=False),
    st.floats(-2000, 2000, allow_subnormal=False),
    st.integers(2, 500),
)
@example(-30.0, 30.0, 21)
def test_evenly_spaced_lists_have_exact_ends_and_ascend(low: float, high: float, count: int) -> None:
    assume(high - low > 1e-3)
    values = parse_list(f"{low!r}:{high!r}:{count}", "--rack")
    assert values is not None
    assert len(values) == count
    assert math.isclose(values[0], low, abs_tol=1e-11)
    assert math.isclose(values[-1], high, abs_tol=1e-11)
    assert all(a < b for a, b in pairwise(values))


@given(st.lists(st.floats(-2000, 2000), min_size=1, max_size=9, unique=True))
def test_listed_values_come_back_as_written(values: list[float]) -> None:
    ordered = sorted(values)
    assert parse_list(",".join(repr(v) for v in ordered), "--rack") == ordered


@given(st.text(max_size=12))
def test_any_text_is_read_or_refused(text: str) -> None:
    try:
        values = parse_list(text, "--travel")
    except InputError:
        return
    assert values
    assert all(math.isfinite(v) for v in values)


def test_sides() -> None:
    assert SideChoice.BOTH.sides == ("left", "right")
    assert SideChoice.RIGHT.sides == ("right",)
