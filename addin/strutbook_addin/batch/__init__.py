"""Folders of workbooks: every one solved, in parallel, and one summary."""
