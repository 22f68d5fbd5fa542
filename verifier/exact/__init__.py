"""Exact numbers: nothing here returns a float."""
