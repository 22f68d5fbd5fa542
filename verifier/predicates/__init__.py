"""Predicates, one a file."""
