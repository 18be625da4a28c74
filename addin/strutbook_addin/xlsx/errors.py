"""Why a workbook file cannot be read or written, each as a sentence for its user.

RefusedWorkbook
    UnreadableWorkbook      not a workbook, encrypted, damaged, hostile, too large
    UnwritableWorkbook      signed, read-only, open elsewhere
"""

from __future__ import annotations


class RefusedWorkbook(Exception):
    """A workbook with which nothing is done; its text is the sentence for the user."""


class UnreadableWorkbook(RefusedWorkbook):
    """The file cannot be read as a workbook."""


class UnwritableWorkbook(RefusedWorkbook):
    """The workbook can be read, but results cannot be written into it."""
