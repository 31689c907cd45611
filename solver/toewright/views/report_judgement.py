"""The sections of a report that judge: limits, plausibility, targets, and what changed from another file."""

from __future__ import annotations

import math
from collections.abc import Sequence

from toewright.kinematics.limits import limits
from toewright.kinematics.sheet import design_sheets
from toewright.model.axle import Axle
from toewright.model.glossary import quantity
from toewright.studies.comparison import compare, sheet_rows
from toewright.studies.verdicts import check_targets
from toewright.views.comparison_rows import change_sentences, point_rows, row_cells, setting_rows, sheet_headings
from toewright.views.report_blocks import Section, Table, clean, svg_picture, value_cell
from toewright.views.sentences import limit_sentences, sheet_remarks
from toewright.views.words import READ_AS, number


def limits_section(axle: Axle) -> Section:
    """Where the steering ends."""
    return Section(
        "limits",
        "Limits",
        ("Over the rack's stroke and the usual wheel travel.",),
        points=[f"{sentence}." for sentence in limit_sentences(axle, limits(axle))],
    )


def remarks_section(axle: Axle) -> Section:
    """What is possible but odd."""
    remarks = [clean(remark) for remark in sheet_remarks(axle, design_sheets(axle))]
    sentence = (
        "What is possible in the file but odd; none of it is an error."
        if remarks
        else "Nothing odd was found in the file."
    )
    return Section("remarks", "Plausibility", (sentence,), points=[f"{remark}." for remark in remarks])


def targets_section(axle: Axle) -> Section:
    """Does the axle keep the limits that its file sets?

    Raises:
        InputError: for a target that is not understood or can't be measured.
    """
    verdicts = check_targets(axle)
    if not verdicts:
        return Section("targets", "Targets", ("The file sets no [targets], so there is nothing to check.",))
    kept = sum(verdict.passed for verdict in verdicts)
    rows = []
    for verdict in verdicts:
        found = value_cell(verdict.goal.name, verdict.value) if math.isfinite(verdict.value) else "not reached"
        unit = READ_AS.get(verdict.goal.name, (quantity(verdict.goal.name).unit, 1.0, 2))[0].replace("-", "")
        result = "kept" if verdict.passed else "MISSED"
        rows.append([verdict.goal.words, result, f"{found} {unit}".strip(), verdict.worst_place])
    sentence = (
        f"{kept} of {len(verdicts)} targets are kept. They are the file's own: what is good is for the designer to say."
    )
    table = Table("Targets of the file", ["target", "result", "worst value", "worst place"], rows, (1, 3))
    return Section(
        "targets", "Targets", (sentence,), tables=[table], headlines=[f"Targets: {kept} of {len(verdicts)} kept."]
    )


def glance_section(sections: Sequence[Section]) -> Section:
    """What is read first, from all sections."""
    return Section("glance", "At a glance", points=[line for section in sections for line in section.headlines])


def against_section(first: Axle, axle: Axle) -> Section:
    """What changed from another file."""
    from toewright.views.plots_comparison import comparison_figure

    compared = compare([first, axle])
    sentences = [
        f"A is {clean(first.title)} ({clean(first.path.name) if first.path else 'in memory'}), B is this report's file. "
        "Changes are B less A, over positions that both have."
    ]
    tables = []
    (moved,) = compared.moved
    if moved:
        headings = ["point", "side", "forward (mm, x +)", "left (mm, y +)", "up (mm, z +)", "distance (mm)"]
        rows = [[point, side, *others] for side, point, *others in point_rows(moved)]
        mirrored = "; the right side is the mirror image" if compared.mirrored else ""
        tables.append(Table(f"Hardpoints that moved{mirrored}", headings, rows, (1,)))
    else:
        sentences.append("No hardpoint differs.")
    if compared.settings:
        rows = [[clean(cell) for cell in row] for row in setting_rows(compared.settings)]
        tables.append(Table("Settings that differ", ["setting", "A", "B", "unit, sign"], rows, (3,)))
    headings = ["figure", *sheet_headings(2)[1:]]
    for side in ("left",) if compared.mirrored else ("left", "right"):
        whose = "each side" if compared.mirrored else f"{side} side"
        tables.append(
            Table(f"Design position, {whose}", headings, [row_cells(r) for r in sheet_rows(compared, side)], (4,))
        )
    tables.append(Table("Whole axle in the design position", headings, [row_cells(r) for r in compared.rest], (4,)))
    if compared.lock:
        caption = f"Turning, at rack {number(compared.lock_rack, 1)} mm"
        tables.append(Table(caption, headings, [row_cells(r) for r in compared.lock], (4,)))
    picture = svg_picture(
        comparison_figure(compared, plain=True),
        "Change of bump steer from A to B over rack and wheel travel, and curves of both files over each other. "
        "The tables hold the numbers.",
        "What changes from A to B.",
    )
    sentences += [*change_sentences(compared), *map(clean, compared.kinds), *map(clean, compared.notes)]
    headlines = [f"What changed. {s}" for s in change_sentences(compared)]
    return Section("against", "What changed", sentences, [picture], tables, headlines=headlines)
