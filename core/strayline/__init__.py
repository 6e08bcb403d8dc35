"""Strayline: why a boat's shore power trips, and which test to do next."""

__version__ = "0.1.0"
