"""The calculation layer between a workbook's tables and the solver."""
