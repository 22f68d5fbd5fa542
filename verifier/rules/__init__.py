"""Sequence rules, one published construction a file."""
