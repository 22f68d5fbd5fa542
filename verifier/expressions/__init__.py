"""Expressions of a case: one tree, read from text that is never executed."""
