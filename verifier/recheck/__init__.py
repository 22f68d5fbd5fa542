"""A stand-alone re-checker of results folders, for Python 3.11 alone; start reading at check.py."""
