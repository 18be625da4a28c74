"""The tables of a workbook: their schema, units, reading and checking."""
