from __future__ import annotations

from itertools import product

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from toewright.model import InputError
from toewright.model.pointtable import read_point_table, refuse_other_units

ROWS = [("wheel centre", (0.0, 602.5, 228.25)), ("b", (-118.125, 262.0, 291.0)), ("c", (12.0, 3.0, -4.5))]
DELIMITERS = {"tab": "\t", "semicolon": ";", "comma": ",", "spaces": "   "}
HEADERS = ((), ("point", "x", "y", "z"), ("Name", "X [mm]", "Y (mm)", "Z_mm"), ("z", "x", "y", "name"))


def written(delimiter: str, decimal: str, header: tuple[str, ...], quotes: bool, preamble: str = "") -> str:
    mark = DELIMITERS[delimiter]
    order = (
        [header.index("name"), header.index("x"), header.index("y"), header.index("z")]
        if "z" in header[:1]
        else [0, 1, 2, 3]
    )
    lines = [mark.join(f'"{cell}"' if quotes else cell for cell in header)] if header else []
    for name, numbers in ROWS:
        cells = [name, *(repr(v).replace(".", "," if decimal == "comma" else ".") for v in numbers)]
        shuffled = [""] * 4
        for place, cell in zip(order, cells, strict=True):
            shuffled[place] = f'"{cell}"' if quotes else cell
        lines.append(mark.join(shuffled))
    return preamble + "\n".join(lines) + "\n"


CASES = [
    (delimiter, decimal, quotes, header)
    for delimiter, decimal, quotes, header in product(DELIMITERS, ("point", "comma"), (False, True), HEADERS)
    # without quotes, a decimal comma can't stand between commas, nor a name or heading of two words between spaces
    if quotes or not (delimiter == decimal == "comma" or (delimiter == "spaces" and header[:1] in (("z",), ("Name",))))
]


@pytest.mark.parametrize(("delimiter", "decimal", "quotes", "header"), CASES)
def test_detected(delimiter: str, decimal: str, quotes: bool, header: tuple[str, ...]) -> None:
    table = read_point_table(written(delimiter, decimal, header, quotes), "t.csv")
    assert table.names == tuple(name for name, _ in ROWS)
    np.testing.assert_array_equal(table.values, [numbers for _, numbers in ROWS])
    assert (table.delimiter, table.decimal) == (delimiter, decimal)
    assert table.header == header
    assert table.unit == ("mm" if "X [mm]" in header else None)


def test_whole_numbers_between_commas_and_spaces() -> None:
    table = read_point_table("ball joint, 1, 2, 3\nwheel, 4, 5, 6\n", "t.csv")
    assert table.names == ("ball joint", "wheel")
    np.testing.assert_array_equal(table.values, [[1.0, 2.0, 3.0], [4.0, 5.0, 6.0]])
    assert read_point_table("a, 1, 2, 3\nb, 4, 5, 6\n", "t.csv").delimiter == "comma"


def test_comments_blank_lines_marks_and_line_ends() -> None:
    text = "\ufeff# measured\r\n\r\n// by arm\r\npoint;x;y;z\r\n% more\r\n a ; 1,5 ; \u22122 ; +3e1 \r\n  b;.5;2;3;\r\n".replace(
        ".5", "0,5"
    )
    table = read_point_table(text, "t.csv")
    assert table.names == ("a", "b")
    np.testing.assert_array_equal(table.values, [[1.5, -2.0, 30.0], [0.5, 2.0, 3.0]])


def test_a_quoted_name_keeps_its_comma_and_numbers_in_names_are_no_coordinates() -> None:
    table = read_point_table('"upper, front",1.5,2,3\npivot 2,1,2,3\n', "t.csv")
    assert table.names == ("upper, front", "pivot 2")


def test_extra_columns_and_a_side_column() -> None:
    text = "No,side,point,x,y,z,note\n1,left,a,1,2,3,seen\n2,right,a,1,-2,3\n"
    table = read_point_table(text, "t.csv")
    assert table.names == ("left a", "right a")
    np.testing.assert_array_equal(table.values[:, 1], [2.0, -2.0])


@pytest.mark.parametrize(
    ("header", "unit"),
    [
        ("point,x [in],y [in],z [in]", "in"),
        ("point,x/m,y/m,z/m", "m"),
        ("point,X (Inch),Y (Inch),Z (Inch)", "in"),
        ("point,x coord (mm),y coord (mm),z coord (mm)", "mm"),
        ("point,pos_x,pos_y,pos_z", None),
        ("point,x,y,z\n,mm,mm,mm", "mm"),
        ("point,x,y,z\n,[m],[m],[m]", "m"),
    ],
)
def test_unit_of_the_header(header: str, unit: str | None) -> None:
    table = read_point_table(f"{header}\na,1,2,3\nb,1,2,4\n", "t.csv")
    assert (table.unit, table.unit_words) == (unit, ())
    assert table.names == ("a", "b")


@pytest.mark.parametrize("unit", ["cm", "ft"])
def test_other_units_are_refused_and_unknown_words_are_kept(unit: str) -> None:
    table = read_point_table(f"point,x ({unit}),y ({unit}),z ({unit})\na,1,2,3\n", "t.csv")
    with pytest.raises(InputError, match=rf"t\.csv: the header says {unit}; only mm, m and in are read: convert"):
        refuse_other_units(table, "t.csv")
    table = read_point_table("point,x (car),y (car),z (car)\na,1,2,3\n", "t.csv")
    refuse_other_units(table, "t.csv")
    assert (table.unit, table.unit_words) == (None, ("car",))


REFUSED = {
    "nothing": ("", "has no rows of name, x, y, z; give"),
    "comments only": ("# a\n# b\n", "has no rows"),
    "header only": ("point,x,y,z\n# nothing\npoint2,x,y,z", r"line 3: 'x' is not a number; write name, x, y, z"),
    "one column": ("a\nb\nc\n", "line 1 is not a name and three numbers; separate the cells"),
    "decimal commas between commas": (
        "point,x,y,z\na,1,5,2,5,3,5\n",
        r"line 2 has 7 cells \(comma between them\) where the header has 4",
    ),
    "decimal commas, no header": ("a,1,5,2,5,3,5\nb,1,5,2,5,3,5\n", "line 1 has 7 cells"),
    "thousands": (
        "a;1,234;2;3\nb;4;5;6\n",
        "'1,234' may have a decimal comma or be thousands; write every number in the same way",
    ),
    "both marks": ("a;1.234,5;2;3\nb;4;5;6\n", r"line 1: '1\.234,5' is not a number"),
    "mixed marks": ("a;1.25;2;3\nb;4,25;5;6\n", "line 2: '4,25' is not a number"),
    "mixed delimiters": ("a;1;2;3\nb,1,2,3\n", "is not a name and three numbers|has 1 cells"),
    "two sets of columns": ("point,x,y,z,x,y,z\na,1,2,3,4,5,6\n", "header has two columns x; leave one set"),
    "no name column": ("x,y,z\n1,2,3\n", "does not say which column holds the names; call it 'point'"),
    "two name columns": ("part,group,x,y,z\na,b,1,2,3\n", "does not say which column holds the names"),
    "foreign header": ("punkt,laengs,quer,hoch\na,1,2,3\n", "header names no columns x, y and z; name them"),
    "twice": ("a,1,2,3\nb,1,2,3\na,1,2,3\n", r"line 3: 'a' comes a second time \(first in line 1\); remove one"),
    "nan": ("a,nan,2,3\nb,1,2,3\n", "line 1: 'nan' is not a number"),
    "inf": ("a,inf,2,3\nb,1,2,3\n", "line 1: 'inf' is not a number"),
    "overflow": ("a,1e999,2,3\nb,1,2,3\n", "line 1: a coordinate of 'a' is larger than any car's; correct it"),
    "missing cell": ("point,x,y,z\na,1,2\nb,1,2,3\n", "line 2 has 3 cells"),
    "empty cell": ("point,x,y,z\na,1,,3\nb,1,2,3\n", "line 2: '' is not a number"),
    "no name": ("point,x,y,z\n,1,2,3\nb,1,2,3\n", "line 2: '' is no name"),
    "number for a name": ("1,1,2,3\n2,1,2,3\n", "line 1: '1' is no name"),
    "numbered names between spaces": (
        "pivot 1 1 2 3\npivot 2 1 2 3\n",
        "line 1 has more than three numbers; .* in quotes",
    ),
    "two units": ("point,x (mm),y (m),z (mm)\na,1,2,3\n", r"more than one unit \(m, mm\); convert"),
    "unit behind a number": ("a,1 mm,2 mm,3 mm\nb,1,2,3\n", "line 1: '1 mm' is not a number|header names no columns"),
}


@pytest.mark.parametrize(("text", "sentence"), REFUSED.values(), ids=REFUSED.keys())
def test_refused_in_one_sentence(text: str, sentence: str) -> None:
    with pytest.raises(InputError, match=sentence) as caught:
        read_point_table(text, "t.csv")
    assert str(caught.value).startswith("t.csv: ")
    assert "\n" not in str(caught.value)


def number(value: float, decimals: int, decimal: str) -> str:
    text = f"{value:.{decimals}f}"
    return text.replace(".", ",") if decimal == "comma" else text


@settings(max_examples=300)
@given(
    values=st.lists(st.tuples(*[st.floats(-3000, 3000)] * 3), min_size=2, max_size=5),
    decimals=st.integers(0, 4),
    delimiter=st.sampled_from(sorted(DELIMITERS)),
    decimal=st.sampled_from(["point", "comma"]),
    header=st.booleans(),
)
def test_never_silently_wrong(
    values: list[tuple[float, ...]], decimals: int, delimiter: str, decimal: str, header: bool
) -> None:
    mark = DELIMITERS[delimiter]
    rows = [mark.join([f"p{i}q", *(number(v, decimals, decimal) for v in row)]) for i, row in enumerate(values)]
    text = "\n".join(([mark.join(["point", "x", "y", "z"])] if header else []) + rows)
    try:
        table = read_point_table(text, "t.csv")
    except InputError:
        assert (delimiter, decimal) == ("comma", "comma")
        return
    np.testing.assert_array_equal(table.values, [[round(v, decimals) + 0.0 for v in row] for row in values])
