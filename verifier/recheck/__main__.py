"""Run as `python3 -E -S -m recheck .` inside a results folder."""

import sys

if __name__ == "__main__":
    sys.path[:] = sys.path[1:]  # no file of the folder may stand in for a module of Python
    from .check import main

    sys.exit(main(sys.argv[1:]))
