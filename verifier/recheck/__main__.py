"""Run as `python3 -E -S -m recheck .` inside a results folder."""

import sys

if __name__ == "__main__":
    sys.dont_write_bytecode = True
    del sys.path[0]  # the folder itself: no file of it may stand in for a module of Python
    from .check import main

    sys.exit(main(sys.argv[1:]))
