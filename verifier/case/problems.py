"""Collect every problem of a case file with its line, to report all of them at once."""

from dataclasses import dataclass, field

from verifier.case.positions import Path, line_of
from verifier.errors import CaseError, ExpressionError

LIMIT = 20


@dataclass
class Problems:
    """The problems found so far in one file.

    Parameters
    ----------
    file
        The file as the user named it.
    text
        Its text, valid TOML.
    """

    file: str
    text: str
    found: list[tuple[int, str]] = field(default_factory=list)

    def add(self, path: Path, message: str) -> None:
        """Note that `message` holds at `path`."""
        line = line_of(self.text, path) if len(self.found) < LIMIT else 0
        self.found.append((line, message))

    def add_expression(self, path: Path, label: str, error: ExpressionError) -> None:
        """Note an expression that cannot be read, with a caret under the column."""
        self.add(path, f"{label}: {error.problem}\n{error.pointed()}")

    def stop_if_any(self) -> None:
        """Raise everything noted, in the order of the lines.

        Raises
        ------
        CaseError
            If anything was noted.
        """
        if not self.found:
            return
        shown = [f"{self.file}:{line}: {text}" for line, text in sorted(self.found[:LIMIT])]
        if len(self.found) > LIMIT:
            shown.append(f"{self.file}: and {len(self.found) - LIMIT} more")
        raise CaseError(*shown)
