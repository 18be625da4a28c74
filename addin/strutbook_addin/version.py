"""The version that stamps results; the build takes it from here."""

__version__ = "0.1.0"
