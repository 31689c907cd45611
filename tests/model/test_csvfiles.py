from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from corners import SAMPLES

from toewright.model import InputError, load, points_from_csv, points_to_csv


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda path: path.stem)
@pytest.mark.parametrize("side", ["both", "left", "right"])
def test_points_come_back_exactly(sample: Path, side: str, tmp_path: Path) -> None:
    axle = load(sample)
    shifted = axle.with_points({("left", "tie_rod_outer"): axle.left.points["tie_rod_outer"] + 1.0 / 3.0})
    table = tmp_path / "points.csv"
    table.write_text(points_to_csv(shifted, side))
    points = points_from_csv(table, None if side == "both" else "left" if side == "left" else "right")
    assert len(points) == (2 if side == "both" else 1) * len(axle.left.points)
    for (which, name), point in points.items():
        np.testing.assert_array_equal(point, shifted.corner(which).points[name])
    if side == "both":
        rebuilt = axle.with_points(points)
        for name, point in shifted.right.points.items():
            np.testing.assert_array_equal(rebuilt.right.points[name], point)


def test_columns() -> None:
    lines = points_to_csv(load(SAMPLES[0]), "left").splitlines()
    assert lines[0] == "point,x,y,z"
    assert lines[1].startswith("upper_pivot_front,")


def test_refusals(tmp_path: Path) -> None:
    axle = load(SAMPLES[0])
    with pytest.raises(ValueError, match="allowed are"):
        points_to_csv(axle, "middle")
    table = tmp_path / "points.csv"
    text = points_to_csv(axle, "left")
    for content, sentence in (
        (text, "does not say which side"),
        (
            text.replace("point,x,y,z", "point,x (m),y (m),z (m)"),
            "header says m where mm are wanted; use `toewright import`",
        ),
        (text.replace("point,x,y,z", "point,x (cm),y (cm),z (cm)"), "header says cm; only mm, m and in"),
        (text + "spring_seat,1,2,3\n", "'spring_seat' is none of the points of a double-wishbone corner"),
        (text.replace("wheel_centre", "hub"), r"wheel_centre not found .* 'hub'|wheel_centre not found"),
    ):
        table.write_text(content)
        with pytest.raises(InputError, match=sentence) as caught:
            points_from_csv(table)
        assert str(caught.value).startswith(f"{table}: ")
