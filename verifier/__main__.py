"""Run the command line with ``python -m verifier``."""

from verifier.cli import main

if __name__ == "__main__":
    main()
