"""Materials of published standards: steel grades and timber strength classes."""
