"""Exact verification of explicit quasi-random graph constructions."""

__version__ = "0.1.0"
