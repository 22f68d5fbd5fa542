"""What the sections of a case file share: where problems go, and the files that the case names."""

from dataclasses import dataclass, field
from pathlib import Path, PurePosixPath

from verifier.case.positions import Path as KeyPath
from verifier.case.problems import Problems

LARGEST_INPUT = 64 << 20


@dataclass
class Section:
    """What the sections share: where problems go, and the files that the case names."""

    problems: Problems
    folder: Path
    inputs: dict[str, bytes] = field(default_factory=dict)

    def read_input(self, path: KeyPath, label: str, name: str) -> None:
        """Read a file beside the case file; it may lie in no other place."""
        parts = PurePosixPath(name).parts
        if not name or "\\" in name or name.startswith("/") or {".", ".."} & set(parts):
            self.problems.add(path, f"{label}: {name!r} leaves the folder of the case file")
            return
        found = self.folder / name
        try:
            inside = found.resolve().is_relative_to(self.folder.resolve())
            if not inside or not found.is_file():
                self.problems.add(path, f"{label}: there is no file {name!r} beside the case file")
            elif found.stat().st_size > LARGEST_INPUT:
                self.problems.add(path, f"{label}: {name!r} is larger than 64 MiB")
            else:
                self.inputs[name] = found.read_bytes()
        except (OSError, ValueError) as problem:
            self.problems.add(path, f"{label}: {name!r} cannot be read: {problem}")
