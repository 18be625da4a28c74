"""Where a table stands on its sheet: header row, columns, units and the last row."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from strutbook_addin.findings import Findings, Level
from strutbook_addin.sheets import CellValue, ErrorValue, Grid
from strutbook_addin.tables.schema import Column, Role, Table, normal
from strutbook_addin.tables.units import Dimension, Unit, UnitProblem, split_header, unit_of

#: A header row stands in one of the first rows of its sheet.
HEADER_ROWS = 30


@dataclass(frozen=True, eq=False)
class Layout:
    """Where one table stands; rows and columns count from zero."""

    table: Table
    sheet: str  #: name of the sheet as the workbook writes it
    header_row: int
    columns: dict[str, int]  #: schema name -> column on the sheet
    headers: dict[int, str]  #: every header of the row, by column
    units: dict[str, Unit] = field(default_factory=dict)  #: of the columns that have a dimension
    open_columns: dict[str, int] = field(default_factory=dict)  #: header -> column, of columns the user names
    first_row: int = 0
    end_row: int = 0  #: one past the last row of the table

    @property
    def rows(self) -> int:
        """How many rows the table has."""
        return self.end_row - self.first_row


def is_blank(value: CellValue) -> bool:
    """True for an empty cell and for one that holds only spaces."""
    return value is None or (isinstance(value, str) and not value.strip())


def cell(grid: Grid, row: int, column: int) -> CellValue:
    """Value of a cell; beyond the used part of the sheet it is empty."""
    if row < len(grid) and column < len(grid[row]):
        return grid[row][column]
    return None


def find_header(table: Table, grid: Grid) -> int | None:
    """Row that holds most of the table's column names, or None when no row holds any that matters."""
    best, best_score = None, 0
    needed = {normal(column.name) for column in table.columns if column.required or column.key}
    for row, values in enumerate(grid[:HEADER_ROWS]):
        names = {_normal_header(value) for value in values if isinstance(value, str)}
        known = len(names & table.by_normal_name.keys())
        # One word of a title can happen to be a column's name; a header row has two, or all it needs.
        if known >= 2 or (needed and needed <= names):
            score = known + len(names & needed)
            if score > best_score:
                best, best_score = row, score
    return best


def locate(table: Table, sheet: str, grid: Grid, findings: Findings) -> Layout | None:
    """Find the table on its sheet; what is missing or unclear goes to the findings."""
    header_row = find_header(table, grid)
    if header_row is None:
        if table.required or any(not is_blank(value) for row in grid for value in row):
            needed = ", ".join(_example(column) for column in table.inputs if column.required)
            findings.add(
                Level.STOP,
                f"no header row was found in the first {HEADER_ROWS} rows.",
                f"Write a row of headers such as: {needed}.",
                sheet=sheet,
            )
        return None
    headers = {
        column: value.strip()
        for column, value in enumerate(grid[header_row])
        if isinstance(value, str) and value.strip()
    }
    # The header of a case or a combination may be a number.
    headers.update(
        (column, name_text(value))
        for column, value in enumerate(grid[header_row])
        if isinstance(value, (int, float)) and not isinstance(value, bool)
    )
    _report_errors_in_headers(sheet, header_row, grid[header_row], findings)
    columns = _match(table, sheet, header_row, headers, findings)
    units = _units(table, sheet, header_row, headers, columns, findings)
    taken = set(columns.values())
    layout = Layout(
        table,
        sheet,
        header_row,
        columns,
        headers,
        units,
        {text: column for column, text in headers.items() if column not in taken},
        header_row + 1,
        _end_row(table, grid, header_row + 1, columns),
    )
    _report_rows_below(layout, grid, findings)
    return layout


def name_text(value: CellValue) -> str:
    """Name that a cell holds; 1 and 1.0 are the same name.

    >>> name_text(1.0), name_text(" U1 "), name_text(None)
    ('1', 'U1', '')
    """
    if value is None:
        return ""
    if isinstance(value, float) and value.is_integer() and abs(value) < 1e15:
        return str(int(value))
    return str(value).strip()


def nearest(name: str, known: Sequence[str]) -> str:
    """Question that names the nearest known name, or nothing.

    >>> nearest("U11", ["U1", "L1"])
    ' Did you mean U1?'
    """
    import difflib

    close = difflib.get_close_matches(name, known, n=1, cutoff=0.5)
    if not close:
        folded = [other for other in known if other.casefold() == name.casefold()]
        close = folded[:1]
    return f" Did you mean {close[0]}?" if close else ""


def _normal_header(header: str) -> str:
    return normal(split_header(header)[0])


def _example(column: Column) -> str:
    return f"{column.name} [{column.dimension.suggested[0]}]" if column.dimension else column.name


def _report_errors_in_headers(sheet: str, header_row: int, values: Sequence[CellValue], findings: Findings) -> None:
    """A header that shows an error could be any column's, and that column would be missed silently."""
    for column, value in enumerate(values):
        if isinstance(value, ErrorValue):
            findings.add(
                Level.STOP,
                f"the header is {error_words(value)}.",
                "Type the header, or clear the cell.",
                sheet=sheet,
                row=header_row,
                column=column,
            )


def error_words(value: ErrorValue) -> str:
    """An error as a sentence says it.

    >>> error_words(ErrorValue("#DIV/0!", "=1/0"))
    'the error #DIV/0! of the formula =1/0'
    """
    return f"the error {value.text}" + (f" of the formula {value.formula}" if value.formula else "")


def _match(table: Table, sheet: str, header_row: int, headers: dict[int, str], findings: Findings) -> dict[str, int]:
    columns: dict[str, int] = {}
    for column, header in headers.items():
        known = table.by_normal_name.get(_normal_header(header)) or table.by_normal_name.get(normal(header))
        if known is None:
            continue
        if known.name in columns:
            if known.role is Role.INPUT:
                findings.add(
                    Level.STOP,
                    f"the header {known.name} stands twice in this row.",
                    "Rename or remove one of the two columns.",
                    sheet=sheet,
                    row=header_row,
                    column=column,
                )
            continue
        columns[known.name] = column
    unused = [header for column, header in headers.items() if column not in columns.values()]
    for column_ in table.inputs:
        if column_.required and column_.name not in columns:
            findings.add(
                Level.STOP,
                f"the column {column_.name} is missing.{nearest(column_.name, unused)}",
                f"Add a column with the header {_example(column_)}.",
                sheet=sheet,
                row=header_row,
                column=min(headers, default=0),
            )
    return columns


def _units(
    table: Table,
    sheet: str,
    header_row: int,
    headers: dict[int, str],
    columns: dict[str, int],
    findings: Findings,
) -> dict[str, Unit]:
    units: dict[str, Unit] = {}
    for name, column in columns.items():
        schema = table.column(name)
        if schema.dimension is None:
            continue
        unit = header_unit(headers[column], schema.dimension, findings, sheet, header_row, column)
        if unit is not None:
            units[name] = unit
    return units


def header_unit(
    header: str, dimension: Dimension, findings: Findings, sheet: str, row: int, column: int
) -> Unit | None:
    """Unit that a header states; a missing or wrong one is a finding that shows what to write."""
    name, text = split_header(header)
    suggested = " or ".join(f"{name} [{unit}]" for unit in dimension.suggested[:3])
    if text is None:
        problem = f"the header {header!r} states no unit, and the column holds {dimension.words}."
    else:
        try:
            return unit_of(text, dimension)
        except UnitProblem as reason:
            problem = f"in the header {header!r}, {reason}; expected a unit of {dimension.words}."
    findings.add(Level.STOP, problem, f"Write {suggested}.", sheet=sheet, row=row, column=column)
    return None


def _input_columns(table: Table, columns: dict[str, int]) -> list[int]:
    names = {column.name for column in table.inputs} or set(columns)
    return [column for name, column in columns.items() if name in names]


def _end_row(table: Table, grid: Grid, first: int, columns: dict[str, int]) -> int:
    inputs = _input_columns(table, columns)
    row = first
    while row < len(grid) and any(not is_blank(cell(grid, row, column)) for column in inputs):
        row += 1
    return row


def _report_rows_below(layout: Layout, grid: Grid, findings: Findings) -> None:
    """Rows below the blank row that ends a table are not read; say so when they hold a key."""
    if not layout.table.inputs:
        return
    key = next((layout.columns[c.name] for c in layout.table.inputs if c.required and c.name in layout.columns), None)
    if key is None:
        return
    for row in range(layout.end_row + 1, len(grid)):
        if not is_blank(cell(grid, row, key)):
            findings.add(
                Level.LOOK,
                f"the table ends at the blank row {layout.end_row + 1}, so this cell and what is below it "
                "was not read.",
                "Close the gap if the rows belong to the table.",
                sheet=layout.sheet,
                row=row,
                column=key,
            )
            return
