r"""Expressions of a case as formulas: set as maths where they fit, else as they were typed."""

import re
from collections.abc import Mapping, Sequence

from verifier.appendix.values import run
from verifier.case.case import Case, Condition
from verifier.expressions.latex import to_latex
from verifier.registry import PREDICATES, QUANTITIES
from verifier.typography.escape import Latex, plain, tex, tex_keeping_blanks

AFTER = re.compile(r"[^-+*/^=<>,(_]*(?:[<>!]=|[-+*/^=<>,(_]|$)")  # up to a place to break after


def symbols() -> Mapping[str, str]:
    """Return how each quantity and predicate is written where the author says nothing."""
    quantities = {name: entry.symbol for name, entry in QUANTITIES.entries.items()}
    predicates = {name: entry.symbol for name, entry in PREDICATES.entries.items()}
    return {**predicates, **quantities}


class Formulas:
    """The printer of one case: its notation, and the symbols of the registries.

    Parameters
    ----------
    case
        The case whose `[notation]` is used.
    """

    def __init__(self, case: Case) -> None:
        self.notation = dict(case.notation)
        self.symbols = symbols()

    def maths(self, condition: Condition) -> str:
        """Return an expression as typed, abbreviations kept, as LaTeX for maths."""
        return to_latex(condition.tree, self.notation, self.symbols)

    def symbol(self, name: str, letters: Sequence[str]) -> str:
        """Return how a quantity or predicate is written with letters as its arguments."""
        if name in self.notation:
            return self.notation[name]
        made = self.symbols.get(name) or rf"\mathrm{{{tex(name)}}}"
        for place, letter in enumerate(letters):
            made = made.replace(f"{{{place}}}", f"{{{letter}}}")
        return made

    def inline(self, condition: Condition) -> Latex:
        """Return an expression for running text; a long one as typed, which can break."""
        made = self.maths(condition)
        if len(made) <= SHORT:
            return Latex(f"${made}$")
        return Latex(f"\\primewiseinline{{{made}}}{{{typed(condition.text).code}}}")

    def displayed(self, condition: Condition) -> Latex:
        """Return an expression set apart: on one line, else in rows, else as typed."""
        made = self.maths(condition)
        rows = rows_of(made)
        shown = (
            made
            if len(rows) == 1
            else r"\begin{aligned}[c]&" + r"\\[2pt]&\quad ".join(rows) + r"\end{aligned}"
        )
        return Latex(f"\\primewiseformula{{{made}}}{{{shown}}}{{{typed(condition.text).code}}}")


SHORT = 16
JUNCTION = re.compile(r"\\text\{ (?:and|or) \}")
RELATION = re.compile(r"\\(?:le|ge|ne)(?![A-Za-z])|[<>=]")


def rows_of(maths: str) -> list[str]:
    r"""Return a formula cut before its junctions, or else its relations, outside all groups.

    Examples
    --------
    >>> rows_of(r"a \le \frac{b=c}{d}")
    ['a', '\\le \\frac{b=c}{d}']
    """
    cutting = JUNCTION if JUNCTION.search(maths) else RELATION
    cuts = [0]
    depth = 0
    place = 0
    while place < len(maths):
        found = cutting.match(maths, place)
        if maths[place] in "{}":
            depth += 1 if maths[place] == "{" else -1
        elif maths.startswith(r"\left", place) and not maths[place + 5 : place + 6].isalpha():
            depth += 1
        elif maths.startswith(r"\right", place) and not maths[place + 6 : place + 7].isalpha():
            depth -= 1
        elif found is not None and depth == 0 and place > 0:
            cuts.append(place)
        place = found.end() if found is not None else place + (2 if maths[place] == "\\" else 1)
    pieces = [maths[a:b].strip() for a, b in zip(cuts, [*cuts[1:], len(maths)], strict=True)]
    return [piece for piece in pieces if piece]


def _broken(piece: str) -> str:
    return re.sub("[0-9]+", lambda found: run(found.group()), piece)


def typed(text: str) -> Latex:
    r"""Return an expression in typewriter letters that may break at its operators.

    Examples
    --------
    >>> print(typed("n^2 + 1").code)
    \texttt{n\textasciicircum{}\allowbreak 2 + 1}
    """
    pieces = [_broken(tex_keeping_blanks(piece)) for piece in AFTER.findall(plain(text))]
    made = "".join(
        piece if piece.endswith(" ") or following.startswith(" ") or not following
        else piece + r"\allowbreak "
        for piece, following in zip(pieces, [*pieces[1:], ""], strict=True)
    )  # fmt: skip
    return Latex(f"\\texttt{{{made}}}")
