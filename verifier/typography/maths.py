r"""The maths that an author may write in `heads` and `[notation]`: a small grammar, nothing else.

A text is accepted only if all of it is read by the grammar below, so an accepted text is balanced,
calls no command outside the lists, and cannot stop the LaTeX run.

    maths  = { atom [scripts] }
    atom   = letter | digit | sign | symbol | command argument... | "{" maths "}"
           | "\left" delimiter maths "\right" delimiter
    script = ("^" | "_") (letter | digit | "{" maths "}"), each at most once; primes
"""

import re
from dataclasses import dataclass

from verifier.typography.escape import Latex, tex_keeping_blanks, unprintable

LONGEST = 120
DEEPEST = 12


def _words(text: str) -> frozenset[str]:
    return frozenset(text.split())


LETTERS = _words(  # these may also stand as a script without braces
    """
    alpha beta gamma delta epsilon varepsilon zeta eta theta vartheta iota kappa lambda mu nu xi pi
    rho varrho sigma tau upsilon phi varphi chi psi omega Gamma Delta Theta Lambda Xi Pi Sigma
    Upsilon Phi Psi Omega ell partial infty prime ast star circ bullet
    """
)
SYMBOLS = LETTERS | _words(
    """
    hbar imath jmath Re Im emptyset varnothing nabla
    sum prod max min sup inf log exp sin cos tan gcd deg det dim ker lim arg
    le leq ge geq ne neq equiv approx sim simeq cong subset subseteq in notin ni mid nmid parallel
    pm mp times cdot oplus otimes cup cap setminus wedge vee
    to mapsto leftarrow rightarrow leftrightarrow Rightarrow ldots cdots dots forall exists
    neg square blacksquare triangle langle rangle lfloor rfloor lceil rceil lvert rvert lVert rVert
    vert Vert quad qquad
    """
)
ONE = _words(
    """
    mathrm mathit mathbf mathsf mathtt mathcal mathbb mathfrak operatorname hat widehat bar
    overline underline tilde widetilde vec dot ddot sqrt
    """
)
COMMANDS = dict.fromkeys(ONE, 1) | dict.fromkeys(_words("frac tfrac dfrac binom"), 2)
SIZES = _words("big Big bigl bigr Bigl Bigr bigg biggl biggr")
DELIMITERS = _words(
    r"""
    ( ) [ ] | / . \{ \} \| \langle \rangle \lfloor \rfloor \lceil \rceil \lvert \rvert
    \lVert \rVert \vert \Vert
    """
)
SPACES = frozenset(("\\,", "\\;", "\\:", "\\!", "\\ "))
SIGNS = frozenset("+-*/=<>()[]|.,:;!?")
TOKEN = re.compile(r"\\(?:[A-Za-z]+|.)|.", re.DOTALL)
DOLLARS = re.compile(r"\$([^$]*)\$")


class _Refused(Exception):  # noqa: N818 it never leaves this file
    """The text is outside the grammar."""


@dataclass
class _Reader:
    lexemes: list[str]
    place: int = 0

    def peek(self) -> str:
        return self.lexemes[self.place] if self.place < len(self.lexemes) else ""

    def take(self) -> str:
        lexeme = self.peek()
        self.place += 1
        return lexeme

    def maths(self, depth: int, ends: tuple[str, ...]) -> None:
        """Read atoms up to one of `ends`, which stays unread; "" is the end of the text."""
        if depth > DEEPEST:
            raise _Refused(f"groups nest deeper than {DEEPEST}")
        while self.peek() not in ends:
            if not self.peek():
                raise _Refused(f"{ends[0]} is missing at the end")
            self.atom(depth)
            self.scripts(depth)

    def atom(self, depth: int) -> None:
        lexeme = self.take()
        if lexeme == "{":
            self.group_rest(depth)
        elif lexeme == "\\left":
            self.delimiter()
            self.maths(depth + 1, ("\\right",))
            self.take()
            self.delimiter()
        elif lexeme[1:] in SIZES:
            self.delimiter()
        elif lexeme.startswith("\\") and lexeme[1:] in COMMANDS:
            for _ in range(COMMANDS[lexeme[1:]]):
                self.group(lexeme, depth)
        elif not _single(lexeme):
            raise _Refused(_why(lexeme))

    def group(self, owner: str, depth: int) -> None:
        self.blanks()
        if self.take() != "{":
            raise _Refused(f"{owner} wants its argument in braces")
        self.group_rest(depth)

    def group_rest(self, depth: int) -> None:
        self.maths(depth + 1, ("}",))
        self.take()

    def delimiter(self) -> None:
        lexeme = self.take()
        if lexeme not in DELIMITERS:
            raise _Refused(f"{lexeme!r} is no delimiter" if lexeme else "a delimiter is missing")

    def blanks(self) -> None:
        while self.peek() == " ":
            self.take()

    def scripts(self, depth: int) -> None:
        seen: set[str] = set()
        while True:
            self.blanks()
            lexeme = self.peek()
            if lexeme not in ("^", "_", "'"):
                return
            self.take()
            kind = "^" if lexeme == "'" else lexeme
            if kind in seen:
                raise _Refused(f"a second {lexeme} on one letter; use braces")
            seen.add(kind)
            if lexeme == "'":
                self.primes()
            else:
                self.script(lexeme, depth)

    def primes(self) -> None:
        while self.peek() == "'":
            self.take()
        if self.peek() == "^":
            raise _Refused("a power on a primed letter; use braces")

    def script(self, owner: str, depth: int) -> None:
        self.blanks()
        lexeme = self.take()
        if lexeme == "{":
            self.group_rest(depth)
        elif lexeme[1:] not in LETTERS and not (lexeme.isascii() and lexeme.isalnum()):
            raise _Refused(f"{owner} wants a letter, a digit or a group in braces")


def _single(lexeme: str) -> bool:
    if lexeme.startswith("\\"):
        return lexeme[1:] in SYMBOLS or lexeme in SPACES or lexeme in ("\\{", "\\}", "\\|")
    return lexeme == " " or lexeme in SIGNS or (lexeme.isascii() and lexeme.isalnum())


def _why(lexeme: str) -> str:
    if lexeme.startswith("\\") and len(lexeme) > 1:
        return f"the command {lexeme} is not allowed"
    if lexeme in ("^", "_"):
        return f"{lexeme} stands on nothing"
    return f"{lexeme!r} is not allowed in maths"


def check_maths(text: str) -> str | None:
    r"""Return why `text` is no maths that an appendix prints, or None if it is.

    Examples
    --------
    >>> check_maths(r"\Sigma_6(G)")
    >>> check_maths(r"\input{x}")
    'the command \\input is not allowed'
    >>> check_maths("x^^5cinput")
    '^^ is not allowed'
    """
    if "^^" in text:
        return "^^ is not allowed"
    if len(text) > LONGEST:
        return f"longer than {LONGEST} characters"
    if not text.strip():
        return "nothing stands there"
    try:
        _Reader(TOKEN.findall(text)).maths(0, ("",))
    except _Refused as refused:
        return str(refused)
    return None


def check_head(text: str) -> str | None:
    r"""Return why `text` is no head of a column, or None if it is words, and maths in dollars.

    Examples
    --------
    >>> check_head("$\\Sigma$ over $n$")
    >>> check_head("cost in $")
    'a $ without its partner'
    """
    if "^^" in text:
        return "^^ is not allowed"
    if text.count("$") % 2:
        return "a $ without its partner"
    for found in DOLLARS.findall(text):
        problem = check_maths(found)
        if problem is not None:
            return problem
    return unprintable(DOLLARS.sub("", text))


def head(text: str) -> Latex:
    """Return a head that `check_head` accepts as LaTeX: words escaped, maths as it stands.

    Raises
    ------
    ValueError
        If `check_head` refuses it.
    """
    problem = check_head(text)
    if problem is not None:
        raise ValueError(f"head {text!r}: {problem}")
    pieces = re.split(r"(\$[^$]*\$)", text)
    return Latex("".join(p if p.startswith("$") else tex_keeping_blanks(p) for p in pieces))
