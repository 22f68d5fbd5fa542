"""Quantities, one a file: exact value and witness."""
