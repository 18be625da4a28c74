"""An empty sheet `Combinations` filled in by the rule that `Job` names, from the natures of the cases.

What is filled in are ordinary rows: they are read like typed ones, stay in the workbook, and can be edited. Clear them
to have them made anew.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from typing import TYPE_CHECKING

from strutbook_addin.findings import Findings, Level
from strutbook_addin.model.combinations import Cases, read_cases
from strutbook_addin.sheets import CellValue, Grid
from strutbook_addin.tables.headers import Layout, is_blank, name_text, nearest
from strutbook_addin.tables.reading import read_table
from strutbook_addin.tables.schema import COMBINATIONS
from strutbook_addin.workbook import Rows, Workbook

if TYPE_CHECKING:
    from strutbook.combinations import Generated

LABEL = "Combination rule"
#: Header of the column that says by which expression a row was made; a remark, which no run reads.
RULE = "Made by"


def with_generated_combinations(workbook: Workbook, findings: Findings) -> Workbook:
    """The workbook with the rows that its rule makes, where it names one and has no combinations yet."""
    name = workbook.labels.texts.get(LABEL, "")
    table = workbook.tables.get(COMBINATIONS.sheet)
    present = workbook.grids.get(COMBINATIONS.sheet, [])
    in_use = table.rows if table is not None else any(not is_blank(value) for row in present for value in row)
    if not name or in_use:
        return workbook
    from strutbook.combinations import RULES, NatureNeeded

    rules = {"".join(known.casefold().split()): known for known in RULES}
    rule = rules.get("".join(name.casefold().split()))
    if rule is None:
        question = nearest(name, list(RULES))
        what = f"{name!r} is no rule that is known.{question}"
        workbook.labels.report(findings, LABEL, what, f"Write one of: {', '.join(RULES)}; or clear the cell.")
        return workbook
    loads = [workbook.tables[sheet] for sheet in ("Loads", "Member loads", "Settlements") if sheet in workbook.tables]
    cases = read_cases(workbook.tables.get("Cases"), loads)
    natures = dict(zip(cases.names.names, cases.natures, strict=True))
    try:
        generated = RULES[rule](natures)
    except NatureNeeded as needed:
        _report_nature(needed.case, cases, workbook, findings)
        return workbook
    sheet = workbook.names.get(COMBINATIONS.sheet, COMBINATIONS.sheet)
    rows = _rows(generated, natures, sheet, present, None if table is None else table.layout)
    grid = _laid_over(present, rows)
    read = read_table(COMBINATIONS, sheet, grid, findings, set(natures))
    if read is None:
        return workbook
    findings.add(
        Level.NOTE,
        f"{len(generated)} combinations were made by {rule} from the natures of the cases.",
        "They are ordinary rows now: look through them, edit them, or clear them to have them made anew.",
        sheet=sheet,
    )
    return replace(
        workbook,
        names={**workbook.names, COMBINATIONS.sheet: sheet},
        grids={**workbook.grids, COMBINATIONS.sheet: grid},
        tables={**workbook.tables, COMBINATIONS.sheet: read},
        filled_in=(rows,),
    )


def _report_nature(case: str, cases: Cases, workbook: Workbook, findings: Findings) -> None:
    what = f"the case {case} has no nature, so no rule can give it a factor."
    todo = "Write its nature on the sheet Cases, or clear the combination rule on the sheet Job."
    if cases.table is None:
        workbook.labels.report(findings, LABEL, what, todo)
    else:
        cases.table.report(findings, cases.table.text("Case").index(case), "Nature", what, todo)


def _rows(
    generated: list[Generated], natures: Mapping[str, str], sheet: str, grid: Grid, layout: Layout | None
) -> Rows:
    """Header row and rows below it, in the columns that stand there already and new ones behind them."""
    top = 0 if layout is None else layout.header_row
    columns: dict[str, int] = {}
    if layout is not None:
        columns = {**layout.columns, **{name_text(header): place for header, place in layout.open_columns.items()}}
    free = max([-1, *(len(row) - 1 for row in grid)]) + 1 if layout is None else max(layout.headers, default=-1) + 1
    for header in ("Combination", "For", *natures, RULE):
        if header not in columns:
            columns[header] = free
            free += 1
    width = max(columns.values()) + 1
    header_row: list[CellValue] = [None] * width
    if layout is not None:
        header_row[: len(grid[top])] = grid[top][:width]
    for header, column in columns.items():
        header_row[column] = header_row[column] or header
    lines: list[list[CellValue]] = [header_row]
    for combination in generated:
        line: list[CellValue] = [None] * width
        line[columns["Combination"]], line[columns["For"]] = combination.name, combination.purpose
        line[columns[RULE]] = combination.rule
        for case, factor in combination.factors.items():
            line[columns[case]] = factor
        lines.append(line)
    return Rows(sheet, top, lines)


def _laid_over(grid: Grid, rows: Rows) -> Grid:
    """Cells of the sheet as they will be once the rows are written."""
    before = grid[: rows.top] + [[] for _ in range(rows.top - len(grid))]
    return [*before, *rows.lines]
