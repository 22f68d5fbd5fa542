"""Graph kinds, one a file."""
