"""What LaTeX may print: text escaped, maths checked, bibliography entries read."""
