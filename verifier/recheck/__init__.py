"""A stand-alone re-checker of results folders; it needs nothing but Python 3.11. Start at check.py."""

import sys

if __name__ == "recheck":  # the copy inside a results folder leaves no compiled files behind it
    sys.dont_write_bytecode = True
