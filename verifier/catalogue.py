"""Load every file of the stage folders, so that their entries stand in the registries."""

import importlib
import pkgutil

FOLDERS = ("rules", "graphs", "quantities", "predicates")


def load() -> None:
    """Import the stage folders; nobody edits a list when an entry is added."""
    for folder in FOLDERS:
        package = importlib.import_module(f"verifier.{folder}")
        for found in pkgutil.iter_modules(package.__path__):
            importlib.import_module(f"verifier.{folder}.{found.name}")
