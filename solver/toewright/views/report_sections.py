"""The sections of a report that show what an axle is and does."""

from __future__ import annotations

import math

import numpy as np

from toewright.kinematics.riding import RideMaps, default_roll, ride
from toewright.kinematics.sheet import design_sheets
from toewright.kinematics.summary import BumpSteer, bump_steer, mirror_images, one_side_tells_all
from toewright.kinematics.sweep import default_rack, default_travel, sweep
from toewright.kinematics.turning import turn
from toewright.model.axle import POINT_NAMES, Axle
from toewright.model.errors import InputError
from toewright.model.glossary import quantity
from toewright.studies.comparison import SETTINGS
from toewright.views.drawing import draw
from toewright.views.render_vector import paint
from toewright.views.report_blocks import ROWS, Section, Table, clean, png_picture, result_table, svg_picture
from toewright.views.scene.build import Pose, build_scene
from toewright.views.sentences import (
    SHOWN_FROM,
    ackermann_sentences,
    ackermann_shown,
    circle_sentences,
    ride_sentences,
)
from toewright.views.toe import ToeScale, ToeUnit
from toewright.views.words import figure, lock_words, number, spread_indices

LOCUS = 13
"""Wheel travels at which the paths of the joints are drawn."""

FINE = 61
"""Positions of a curve in a picture."""


def job_section(axle: Axle) -> Section:
    """What the file says of the car, and the axes and signs of all that follows."""
    rows = [
        ["title", clean(axle.title), ""],
        ["corners", " and ".join(dict.fromkeys((axle.left.kind, axle.right.kind))), ""],
    ]
    rows.append(["sides", "mirror images" if mirror_images(axle) else "different", ""])
    for table, keys in SETTINGS.items():
        for key, unit in keys.items():
            value = getattr(getattr(axle, table), key, None)
            if value is not None:
                rows.append([f"{table}.{key}", f"{value:g}" if isinstance(value, int | float) else str(value), unit])
    if axle.rack is None:
        rows.append(["rack", "none: toe links fixed to the body", ""])
    else:
        rows.append(["rack.axis", "({:.4f}, {:.4f}, {:.4f})".format(*axle.rack.axis), "x, y, z"])
    if axle.vehicle.other_axle is not None:
        rows.append(["vehicle.other_axle", clean(axle.vehicle.other_axle.name), "file"])
    sentences = (
        "Axes are ISO 8855: x forward, y left, z up. Lengths are in mm and angles in deg unless a table says otherwise, whatever the file "
        "was written in.",
        "Toe figures are of one wheel, toe-in +. Camber: top outboard +. Steer angles: to the left +. Rack travel: along the rack's axis "
        "+, which points to the left unless the file says otherwise. Wheel travel: bump +, rebound -.",
    )
    return Section(
        "job", "The job", sentences, tables=[Table("Job data", ["setting", "value", "unit, sign"], rows, (1, 2))]
    )


def hardpoints_section(axle: Axle) -> Section:
    """Coordinates of all hardpoints."""
    one = mirror_images(axle)
    tables = []
    for corner in (axle.left,) if one else (axle.left, axle.right):
        rows = [
            [name, *(number(float(v), 2, sign=False) for v in corner.points[name])] for name in POINT_NAMES[corner.kind]
        ]
        whose = "left; the right side is the mirror image" if one else corner.side
        headings = ["point", "x (mm, forward +)", "y (mm, left +)", "z (mm, up +)"]
        tables.append(Table(f"Hardpoints, {whose}", headings, rows))
    return Section("hardpoints", "Hardpoints", ("Joint centres in the design position.",), tables=tables)


def linkage_section(axle: Axle) -> Section:
    """Pictures of the linkage: four views with the paths of the joints, and the top view at both locks."""
    reach = default_travel(axle, LOCUS)
    pictures = [
        png_picture(
            draw(build_scene(axle, locus=reach.tolist()), paint),
            "The linkage in the design position, seen from above, obliquely, from ahead and from the left, with the joints' names, a scale "
            "bar and the main angles.",
            f"Design position. Curves: paths of the joints over wheel travel {number(float(reach[0]), 0)} to "
            f"{number(float(reach[-1]), 0)} mm, coloured by bump steer.",
        )
    ]
    sentences = []
    if axle.rack is not None:
        stroke = axle.rack.stroke
        try:
            scene = build_scene(axle, [Pose(), Pose(stroke), Pose(-stroke)])
        except InputError as error:
            sentences.append(f"The locks are not drawn: {clean(str(error))}.")
        else:
            pictures.append(
                png_picture(
                    draw(scene, paint, view="top"),
                    "The linkage from above, straight ahead, and pale at both ends of the rack's stroke.",
                    f"From above; pale: rack travel {number(stroke, 1)} mm and {number(-stroke, 1)} mm.",
                )
            )
    return Section("linkage", "The linkage", sentences, pictures)


def design_section(axle: Axle) -> Section:
    """The design-position sheet with definitions, and link lengths."""
    sheets = design_sheets(axle)
    one = mirror_images(axle)
    shown = sheets[:1] if one else sheets
    columns = ["each side"] if one else [sheet.side for sheet in shown]
    rows = []
    for name in shown[0].figures:
        cells = [figure(name, sheet.figures[name]) for sheet in shown]
        per = " per wheel" if name in ("toe_in", "bump_steer_rate") else ""
        unit = f"{cells[0][1]}{per}, {cells[0][2]}"
        rows.append([quantity(name).label, *(cell[0] for cell in cells), unit, quantity(name).definition])
    last = len(columns) + 1
    lengths = [
        [words, *(number(sheet.lengths.get(words, math.nan), 2, sign=False) for sheet in shown)]
        for words in dict.fromkeys(words for sheet in shown for words in sheet.lengths)
    ]
    lengths.append(
        ["steering arm (joint to steering axis)", *(number(sheet.tie_rod.arm, 2, sign=False) for sheet in shown)]
    )
    tables = [
        Table("Design position", ["figure", *columns, "unit, sign", "definition"], rows, (last, last + 1)),
        Table("Lengths, mm", ["link", *columns], lengths),
    ]
    sentences = [
        "In the definitions s = +1 on the left and -1 on the right, a is the wheel's spin axis, k the steering axis, c the contact point, "
        "g the steering axis at ground, h the wheel's heading and l its left normal."
    ]
    sentences += [
        f"Outer tie rod joint, {'each side' if one else sheet.side}: {sheet.tie_rod.words}." for sheet in shown
    ]
    return Section("design", "Design position", sentences, tables=tables)


def toe_scales(axle: Axle) -> list[ToeScale]:
    """How toe is written: in deg, and as a workshop measures it where the rim's diameter is known."""
    found = [ToeScale(ToeUnit.DEG)]
    if axle.wheel.rim_diameter is not None:
        found.append(ToeScale(ToeUnit.MM, axle.wheel.rim_diameter, rim=True))
    return found


def _bump_steer_table(axle: Axle, of: BumpSteer, scale: ToeScale) -> Table:
    headings = ["wheel travel (mm, bump +)"]
    for rack, steer in zip(of.racks.tolist(), of.steer.tolist(), strict=True):
        where = "" if axle.rack is None else f"rack {number(rack, 1)} mm, {lock_words(steer, rack, axle)}"
        headings.append(where or "toe change")
    rows = []
    for j in reversed(spread_indices(of.travels.size, ROWS, int(np.argmin(np.abs(of.travels))))):
        cells = [
            scale.cell(float(of.angles[0, c, j])) if of.status[c, j] == "ok" else str(of.status[c, j])
            for c in range(of.racks.size)
        ]
        rows.append([number(float(of.travels[j]), 1), *(cell.strip() for cell in cells)])
    return Table(f"Bump steer, {of.side} wheel: change of toe from zero wheel travel, in {scale.words}", headings, rows)


def bump_steer_section(axle: Axle) -> Section:
    """The bump-steer maps, curves and tables, and the worst place."""
    from toewright.views.plots_sweep import sweep_figure

    maps = sweep(axle)
    one = one_side_tells_all(axle, maps) or (axle.rack is None and mirror_images(axle))
    tables = bump_steer(maps)[: 1 if one else 2]
    sentences = []
    for of in tables:
        if of.worst is not None:
            rack = "" if axle.rack is None else f"rack {number(of.worst.rack_travel, 1)} mm, "
            text = "; ".join(scale.text(*of.worst.values) for scale in toe_scales(axle))
            sentences.append(
                f"Worst place, {of.side} wheel: {text}, at {rack}wheel travel {number(of.worst.wheel_travel, 1)} mm."
            )
        if of.worst_straight is not None and axle.rack is not None:
            text = "; ".join(scale.text(*of.worst_straight.values) for scale in toe_scales(axle))
            at = number(of.worst_straight.wheel_travel, 1)
            sentences.append(f"Worst straight ahead, {of.side} wheel: {text}, at wheel travel {at} mm.")
    if one:
        way = "" if axle.rack is None else " with the rack the other way"
        sentences.append(f"The right wheel does the same{way}: the sides are mirror images.")
    sentences += [f"{stop.sentence}." for stop in maps.stops]
    fine = sweep(axle, default_rack(axle, FINE), default_travel(axle, FINE))
    low, high = float(np.nanmin(fine["bump_steer"])), float(np.nanmax(fine["bump_steer"]))
    kind = (
        "Curves"
        if axle.rack is None
        else "Map over rack travel and wheel travel, and curves at several rack positions,"
    )
    picture = svg_picture(
        sweep_figure([axle], [fine], plain=True),
        f"{kind} of bump steer and camber; bump steer runs from {number(low, 3)} to {number(high, 3)} deg per wheel, toe-in +. "
        "The tables below hold the numbers.",
        "Bump steer and camber. Blue: toes out, amber: toes in; bold line: no toe change.",
    )
    return Section(
        "bump-steer",
        "Bump steer",
        sentences,
        [picture],
        [_bump_steer_table(axle, of, scale) for of in tables for scale in toe_scales(axle)],
        headlines=[f"Bump steer. {sentence}" for sentence in sentences if sentence.startswith("Worst")],
    )


def ride_section(axle: Axle) -> Section:
    """Bump and roll: tables and plots."""
    from toewright.views.plots_ride import ride_figure

    ridden = ride(axle, ("bump", "roll"))
    scale = ToeScale(ToeUnit.DEG)
    alike = mirror_images(axle)
    sides = ("left",) if alike else ("left", "right")
    antis = [(n, 0) for n in ("anti_dive_left", "anti_lift_left", "anti_squat_left") if np.isfinite(ridden[n]).any()]
    columns = {
        "bump": [
            ("bump", 1),
            *((f"bump_steer_{side}", 3) for side in sides),
            *((f"camber_{side}", 2) for side in sides),
            ("track_change", 2),
            ("recession_left", 2),
            ("roll_centre_z", 1),
            *antis,
        ],
        "roll": [
            ("roll_angle", 1),
            ("bump_steer_left", 3),
            ("bump_steer_right", 3),
            ("axle_steer", 3),
            ("camber_road_left", 2),
            ("camber_road_right", 2),
            ("roll_centre_z", 1),
            ("roll_centre_y", 1),
        ],
    }
    titles = {"bump": "Both wheels in bump", "roll": "The body rolls on a flat road"}
    tables, sentences = [], []
    for motion, names in columns.items():
        rows = np.flatnonzero(ridden.part(motion))
        at = ridden[names[0][0]][rows]
        picked = rows[list(reversed(spread_indices(rows.size, ROWS, int(np.argmin(np.abs(at))))))]
        whose = "; the right wheel does the same" if alike and motion == "bump" else ""
        tables.append(result_table(f"{titles[motion]}{whose}", ridden, names, picked))
        sentences += [
            f"{titles[motion]}. {s}" for s in ride_sentences(ridden, motion, rows, scale, alike and motion == "bump")
        ]

    def fine(motion: str) -> RideMaps:
        return ride(axle, (motion,), travel=default_travel(axle, FINE), roll=default_roll(FINE))

    pictures = [
        svg_picture(
            ride_figure([axle], [fine(motion)], plain=True),
            f"{titles[motion]}, curves: {what}. A table below holds the numbers.",
            f"{titles[motion]}, rack straight ahead.",
        )
        for motion, what in (
            ("bump", "toe change and camber of the wheels, and the roll centre"),
            ("roll", "roll steer, camber to the road, and the path of the roll centre"),
        )
    ]
    headlines = [s for s in sentences if "roll steer" in s]
    return Section("ride", "Bump and roll", [*sentences, *ridden.notes], pictures, tables, headlines=headlines)


def turn_section(axle: Axle) -> Section:
    """Turning: Ackermann quality, circles; says why where there is none."""
    from toewright.views.plots_turn import turn_figure

    if axle.rack is None:
        return Section("turn", "Turning", ("This axle has no rack and does not steer.",))
    try:
        turned = turn(axle)
    except InputError as error:
        return Section("turn", "Turning", (f"Left out: {clean(str(error))}.",))
    mirrored = mirror_images(axle)
    mean = turned["mean_steer"]
    among = np.flatnonzero(~(mean < -1e-9)) if mirrored and np.any(mean >= 0.0) else np.arange(len(turned))
    picked = among[spread_indices(among.size, ROWS, int(np.argmin(np.abs(turned.rack_travel[among]))))]
    names: list[tuple[str, int | None]] = [("rack_travel", 1)]
    if np.isfinite(turned["hand_wheel_angle"]).any():
        names.append(("hand_wheel_angle", 0))
    names += [("steer_left", 2), ("steer_right", 2), ("ideal_inner_steer", 2), ("ackermann_error", 2)]
    names += [("ackermann_percent", 0), ("turn_radius", 2), ("kerb_circle", 2)]
    table = result_table("Steer angles and Ackermann quality", turned, names, picked)
    small = [k for k, i in enumerate(picked.tolist()) if not ackermann_shown(mean)[i]]
    blank = range(next(k for k, (name, _) in enumerate(names) if name == "ideal_inner_steer"), len(names))
    rows = [
        ["-" if k in small and c in blank else cell for c, cell in enumerate(row)] for k, row in enumerate(table.rows)
    ]
    sentences = [*ackermann_sentences(turned), *circle_sentences(turned), *turned.notes]
    if mirrored:
        sentences.append("The table shows one way round; the other is the mirror image.")
    pictures = []
    if np.any(ackermann_shown(mean)):
        pictures.append(
            svg_picture(
                turn_figure([axle], [turn(axle, default_rack(axle, FINE))], plain=True),
                "Curves over rack travel and mean steer: steer angles of both wheels with the ideal, Ackermann error and percent, turning "
                "circle, and slip at walking pace. The table below holds the numbers.",
                f"Turning at zero wheel travel; Ackermann figures from {SHOWN_FROM:g} deg of mean steer on.",
            )
        )
    headlines = [f"Turning. {s}" for s in ackermann_sentences(turned)[:2]] + [
        s for s in circle_sentences(turned) if "circle" in s
    ]
    tables = [Table(table.caption, table.headings, rows)]
    return Section("turn", "Turning", sentences, pictures, tables, headlines=headlines)
