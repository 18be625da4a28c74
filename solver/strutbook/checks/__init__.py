"""Checks of members to published standards: one module a standard, one function a clause."""
