"""Workbook files (.xlsx, .xlsm): read as they are, changed without touching what is not ours."""

from strutbook_addin.xlsx.errors import RefusedWorkbook, UnreadableWorkbook, UnwritableWorkbook

__all__ = ["RefusedWorkbook", "UnreadableWorkbook", "UnwritableWorkbook"]
