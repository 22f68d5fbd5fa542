"""The errors of the project, one tree; a claim that fails is a result and no error.

VerifierError
    CaseError             the input asks for something that has no meaning      exit 2
        ExpressionError   one expression of the input cannot be read            exit 2
    UndefinedError        an expression has no value at an instance             verdict open
    UndecidedError        exact arithmetic did not settle it within its limit   verdict open, exit 3
    LimitError            meaningful, but larger than the stated limit          verdict open, exit 3
    OutsideError          the thing spoken of does not exist at an instance     verdict outside
    ToolError             an outside program is missing or failed               exit 6

The re-checker has its own errors, since it may not import these.
"""

from collections.abc import Sequence


class VerifierError(Exception):
    """Root of the tree: everything that this package raises on purpose."""


class CaseError(VerifierError):
    """The input asks for something that has no meaning.

    Parameters
    ----------
    problems
        One line each, `place: what stands there, what was wanted`.
    """

    def __init__(self, *problems: str) -> None:
        super().__init__("\n".join(problems))
        self.problems: Sequence[str] = problems


class ExpressionError(CaseError):
    """One expression of the input cannot be read.

    Parameters
    ----------
    text
        The expression as it stands in the input.
    column
        Offset of the offending character, from 0; at most `len(text)`.
    problem
        What stands there and what was wanted, one line without the position.
    """

    def __init__(self, text: str, column: int, problem: str) -> None:
        super().__init__(problem)
        self.text = text
        self.column = column
        self.problem = problem

    def __reduce__(self) -> tuple[type["ExpressionError"], tuple[str, int, str]]:
        """Return what a process pool needs to carry this error home."""
        return type(self), (self.text, self.column, self.problem)

    def pointed(self) -> str:
        """Return two lines: the expression, and a caret under the offending column."""
        start = max(0, self.column - 60)
        shown = self.text[start : start + 76].replace("\n", " ").replace("\t", " ")
        return f"    {shown}\n    {' ' * (self.column - start)}^"


class UndefinedError(VerifierError):
    """An expression has no value at an instance, such as log(0) or 1/0."""


class UndecidedError(VerifierError):
    """Exact arithmetic did not settle a comparison within its stated limit."""


class LimitError(VerifierError):
    """A computation is meaningful, but larger than the stated limit."""


class OutsideError(VerifierError):
    """The thing spoken of does not exist at an instance: edges of an unsymmetric row."""


class ToolError(VerifierError):
    """An outside program is missing or failed."""
