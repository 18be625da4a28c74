"""Hosts of a run: adapters of the `Sheets` protocol."""
