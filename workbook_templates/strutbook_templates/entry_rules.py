"""What cells accept: drop-downs of names and choices, and bounds on numbers, all from the schema."""

from __future__ import annotations

from openpyxl.utils import get_column_letter
from openpyxl.worksheet.datavalidation import DataValidation
from openpyxl.worksheet.worksheet import Worksheet

from strutbook.checks.registry import STANDARDS
from strutbook.combinations import RULES
from strutbook_addin.tables.schema import BY_SHEET, CASES, Bound, Column, Kind, Role
from strutbook_templates.sheet_frame import FIRST_ROW, HEADER_ROW, LAST_ROW

#: Suggestions for what a support holds; any direction may be typed as well.
_HOLDS = {2: "x y,y,x", 3: "x y z,z,x z,y z"}
#: Larger than any number that a table of a truss holds.
_ANY_NUMBER = ("-1E+100", "1E+100")


def add_entry_rules(sheet: Worksheet, columns: tuple[Column, ...], dimension: int) -> None:
    """Drop-downs and bounds of the input columns of a table."""
    for place, column in enumerate(columns, start=1):
        if column.role is Role.RESULT:
            continue
        rule = _rule(column, dimension)
        if rule is not None:
            letter = get_column_letter(place)
            rule.add(f"{letter}{FIRST_ROW}:{letter}{LAST_ROW}")
            sheet.add_data_validation(rule)


def choose_cases(sheet: Worksheet, first: int, count: int) -> None:
    """Names of cases to choose from in headers, and numbers below them."""
    left, right = get_column_letter(first), get_column_letter(first + count - 1)
    headers = _names_of(CASES.sheet)
    headers.add(f"{left}{HEADER_ROW}:{right}{HEADER_ROW}")
    sheet.add_data_validation(headers)
    factors = _number(Bound.ANY)
    factors.add(f"{left}{FIRST_ROW}:{right}{LAST_ROW}")
    sheet.add_data_validation(factors)


def choose_on_job(sheet: Worksheet, label: str, row: int) -> None:
    """Drop-downs beside the labels of `Job` that name a standard or a rule; other spellings may be typed."""
    choices = {"Standard": tuple(STANDARDS), "Combination rule": tuple(RULES)}
    names = choices.get(label)
    if names is not None:
        rule = DataValidation(type="list", formula1='"' + ",".join(names) + '"', allow_blank=True)
        rule.showErrorMessage = False
        rule.add(f"B{row}")
        sheet.add_data_validation(rule)


def _rule(column: Column, dimension: int) -> DataValidation | None:
    if column.kind is Kind.NUMBER:
        return _number(column.bound)
    if column.kind is Kind.CHOICE:
        return _choice(column.choices)
    if column.refers_to:
        rule = _names_of(column.refers_to)
        # Designations of standard sections and grades of materials may be typed as well.
        rule.showErrorMessage = column.refers_to not in {"Sections", "Materials"}
        return rule
    if column.name == "Holds":
        rule = DataValidation(type="list", formula1=f'"{_HOLDS[dimension]}"', allow_blank=True)
        rule.showErrorMessage = False
        return rule
    return None


def _number(bound: Bound) -> DataValidation:
    rule = DataValidation(type="decimal", allow_blank=True)
    if bound is Bound.ANY:
        rule.operator, rule.formula1, rule.formula2 = "between", *_ANY_NUMBER
    else:
        rule.operator = "greaterThan" if bound is Bound.POSITIVE else "greaterThanOrEqual"
        rule.formula1 = "0"
    _explain(rule, "Not a number that fits", f"Expected {bound.value}. The unit stands in the header.")
    return rule


def _choice(choices: tuple[str, ...]) -> DataValidation:
    rule = DataValidation(type="list", formula1='"' + ",".join(choices) + '"', allow_blank=True)
    _explain(rule, "Not one of the choices", "Expected one of: " + ", ".join(choices) + ".")
    return rule


def _names_of(sheet: str) -> DataValidation:
    """Names in the first column of a sheet, as many as there are.

    Only a warning: members may be typed before the joints they join.
    """
    key = BY_SHEET[sheet].columns[0].name
    cells = f"{_quoted(sheet)}!$A${FIRST_ROW}:$A${LAST_ROW}"
    names = f"OFFSET({_quoted(sheet)}!$A${FIRST_ROW},0,0,MAX(1,COUNTA({cells})),1)"
    rule = DataValidation(type="list", formula1=names, allow_blank=True)
    _explain(rule, f"{key} not found", f"The sheet {sheet} has no row with this name yet.")
    rule.errorStyle = "warning"
    return rule


def _explain(rule: DataValidation, title: str, text: str) -> None:
    rule.showErrorMessage = True
    rule.errorTitle, rule.error = title[:32], text[:255]


def _quoted(sheet: str) -> str:
    return f"'{sheet}'" if " " in sheet else sheet
