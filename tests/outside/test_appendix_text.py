"""What goes into LaTeX: text, maths of the author, numbers, BibTeX, identities."""

import hashlib
import os
import re
import shutil
import subprocess
from fractions import Fraction

import pytest
import sympy
from jinja2 import TemplateNotFound, UndefinedError

from verifier.appendix import identities
from verifier.appendix.bibliography import bib_text, item, published
from verifier.appendix.constants import constant_remark
from verifier.appendix.environment import environment, read_template
from verifier.appendix.polynomials import polynomial
from verifier.appendix.values import digits, rounded, short, value
from verifier.expressions.parse import parse
from verifier.typography.bibtex import check_bibtex, decoded, read_bibtex
from verifier.typography.escape import LETTERS, Latex, plain, tex, unprintable
from verifier.typography.maths import COMMANDS, SYMBOLS, check_head, check_maths, head

requires_latex = pytest.mark.skipif(
    shutil.which("pdflatex") is None and "CI" not in os.environ,
    reason="pdflatex is not installed; in continuous integration this is a failure",
)

# names as their bearers, all long dead, wrote them
NAMES = [
    "Erdős",
    "Rényi",
    "Gödel",
    "Čebyšëv",
    "Łukasiewicz",
    "Şükrü",
    "Ångström",
    "Bjørn",
    "Țițeica",
]


def latex_log(folder, body, name="page"):
    """Compile a page of `body` and return its log; an error of LaTeX is an error here."""
    source = (
        "\\documentclass{amsart}\\usepackage[T1]{fontenc}\\usepackage{lmodern}"
        "\\usepackage{amssymb}\\begin{document}\n" + body + "\n\\end{document}\n"
    )
    (folder / f"{name}.tex").write_text(source, encoding="ascii")
    ended = subprocess.run(
        ["pdflatex", "-no-shell-escape", "-interaction=nonstopmode", "-halt-on-error", f"{name}.tex"],
        cwd=folder, capture_output=True, check=False, stdin=subprocess.DEVNULL,
    )  # fmt: skip
    log = (folder / f"{name}.log").read_text(encoding="latin-1")
    assert ended.returncode == 0, [line for line in log.splitlines() if line.startswith("!")]
    return log


@pytest.mark.parametrize("name", NAMES)
def test_names_of_europe_leave_as_ascii(name):
    assert unprintable(name) is None
    assert tex(name).isascii()


@pytest.mark.parametrize("text", ["χ", "数", "√2", "a ≤ b", "😀", "x̂̌"])
def test_what_cannot_be_set_is_named(text):
    problem = unprintable(text)
    assert problem is not None
    assert "U+" in problem
    with pytest.raises(ValueError, match="cannot be printed"):
        tex(text)


def test_blank_lines_and_direction_marks_go():
    assert plain("one\n\n\ttwo\u202e \u200bthree\0") == "one two three"
    assert "\n" not in tex("a\n\nb")


def test_no_special_character_survives_unescaped():
    made = tex("".join(map(chr, range(32, 127))))
    bare = re.sub(r"\\[A-Za-z]+(\{\})?|\\[{}$&#%_]|\{`\}|\{\}", "", made)
    assert not set(bare) & set('\\{}$&#%_~^<>|"`')


@requires_latex
def test_all_that_can_be_set_is_set(tmp_path):
    characters = "".join(map(chr, range(33, 127))) + "".join(LETTERS)
    characters += "".join(
        c for c in map(chr, range(0xA0, 0x250)) if unprintable(c) is None and c not in LETTERS
    )
    assert len(characters) > 300
    body = "\n\n".join(tex(f"{c}{c} {c}") for c in characters) + "\n\n" + tex("--- ,, '' ?` !`")
    log = latex_log(tmp_path, body)
    assert "Missing character" not in log
    assert "Warning" not in log.replace("LaTeX Font Warning", "")


HOSTILE = [
    r"\input{/etc/passwd}", "x^^5cinput", r"\write18{ls}", r"\csname input\endcsname", r"\def\a{b}",
    r"\catcode`\%=12", "a$b", "%", "#1", "&", r"\\", "{", "}", "{a}}{", r"\left(a", r"a\right)",
    r"\frac{a}", r"\frac ab", "^2_", "a^b^c", "a_b_c", "f'^2'", "a^", "_", r"\unknown", "é", "~",
    r"\begin{array}", r"\mathrm a", "\\", "a\n\nb", "x" * 200, "{" * 40 + "}" * 40, "", "  ", "\0",
    r"\loop", r"\text{a}", r"\href{x}{y}", '"', r"\sqrt[3]{2}", "a^\\,", "``",
]  # fmt: skip
HARMLESS = [
    r"\Sigma_6(G)", r"C_2(E_N)", r"\sum_{i,j}\left|S(i,j)-\frac{n}{2}\right|", "x'_1", "f''",
    r"\bigl\{a\bigr\}", r"\operatorname{tr}A^4", r"\lambda_{2}\,/\,\sqrt{p}", r"\mathcal{W}", "n^{5/2}",
    r"\left. a \right|_{x=1}", r"\|\chi\|", "a < b",
]  # fmt: skip


@pytest.mark.parametrize("text", HOSTILE)
def test_hostile_maths_is_refused(text):
    assert check_maths(text) is not None


@pytest.mark.parametrize("text", HARMLESS)
def test_plain_maths_is_accepted(text):
    assert check_maths(text) is None


def test_heads_hold_words_and_maths():
    assert check_head("ratio of $\\Sigma$ & more") is None
    assert head("50% of $n$ and").code == "50\\% of $n$ and"
    for bad in ["$", "$a$ $", "$\\input{x}$", "χ", "^^5c", "$$"]:
        assert check_head(bad) is not None, bad
    with pytest.raises(ValueError, match="allowed"):
        head("$\\input{x}$")


def fuzzed(count):
    """Texts of pieces of maths, from a hash and so the same in every run."""
    pieces = [
        *"abz019+-=<>()[]|,.!'^_{} /", "^{", "_{", "}", "{", "\\frac{", "}{", "\\left(", "\\right)",
        "\\left|", "\\right|", "\\sum", "\\alpha", "\\,", "\\sqrt{", "\\mathrm{", "\\{", "\\}",
        "\\bigl(", "\\prime", "\\ ", "\\quad", "\\left.", "\\hat{",
    ]  # fmt: skip
    for number in range(count):
        stream = hashlib.sha256(str(number).encode()).digest()
        yield "".join(pieces[byte % len(pieces)] for byte in stream[: 3 + stream[-1] % 12])


@requires_latex
def test_accepted_maths_never_stops_latex(tmp_path):
    accepted = [text for text in fuzzed(40_000) if check_maths(text) is None]
    assert len(accepted) > 1000
    commands = [f"\\{name}" for name in sorted(SYMBOLS)]
    commands += [f"\\{name}" + "{x}" * count for name, count in sorted(COMMANDS.items())]
    body = "\n\n".join(f"${text}$" for text in [*accepted, *HARMLESS, *commands])
    assert "Missing character" not in latex_log(tmp_path, body)


def test_templates_print_integers_text_and_latex_only():
    def printed(thing):
        return environment().from_string("\\VAR{thing}").render(thing=thing)

    assert printed(12) == "12"
    assert printed("a_b") == "a\\_b"
    assert printed(Latex("a_b")) == "a_b"
    for refused in [0.5, True, None, [1], Fraction(1, 2), b"x"]:
        with pytest.raises(TypeError):
            printed(refused)
    with pytest.raises(UndefinedError):
        environment().from_string("\\VAR{nothing}").render()
    with pytest.raises(TypeError):
        environment().from_string("\\VAR{thing ~ 'x'}").render(thing=Latex("a"))


@pytest.mark.parametrize(
    "name", ["../README.md", "/etc/passwd", "appendix/../sources.bib", "", "a//b"]
)
def test_templates_lie_in_their_folder(name):
    with pytest.raises(TemplateNotFound):
        read_template(name)


@pytest.mark.parametrize(
    "text", ["-7", "123456789012345678901234567890", "-98765432109876543210/17"]
)
def test_digits_break_and_stay_the_same(text):
    made = digits(text)
    assert made.replace("\\allowbreak ", "").replace("$-$", "-") == text
    assert max(map(len, re.findall("[0-9]+", made))) <= 14


@pytest.mark.parametrize(
    "ratio", [Fraction(2, 3), Fraction(-22, 7), Fraction(10**30, 3), Fraction(1, 7 * 10**20)]
)
def test_rounding_is_outward(ratio):
    low, high = Fraction(rounded(ratio, up=False)), Fraction(rounded(ratio, up=True))
    assert low < ratio < high
    assert (high - low) / abs(ratio) <= Fraction(1, 10**5)


def test_irrational_values_show_both_ends():
    # sqrt(2) = 1.41421356237309..., from memory
    root = {"lower": "1.41421356237", "upper": "1.41421356238"}
    assert value(root).code == "1.4142135623$_{7}^{8}$"
    assert short(root).code == "1.4142$_{1}^{2}$"
    assert value({"lower": "0.199", "upper": "0.200"}).code == "[0.199,\\allowbreak\\ 0.200]"
    assert value({"lower": "-1.25", "upper": "-1.24"}).code == "$-$1.2$_{5}^{4}$"
    assert value(None).code == "--"
    for bad in [1, 0.5, "0.5", "x", {"lower": "1"}, {"lower": "a", "upper": "b"}]:
        with pytest.raises(ValueError, match="is no"):
            value(bad)


@pytest.mark.parametrize(
    ("typed", "latex"),
    [
        ("x", "$x$"),
        ("-x^2", "$-x^{2}$"),
        ("3*4*x", r"$3\cdot 4x$"),
        ("(x+1)^3", r"$(x+\allowbreak 1)^{3}$"),
        ("x^(1+2)", r"$x^{(1+\allowbreak 2)}$"),
        ("alpha*x", r"$\mathit{alpha}x$"),
        ("x; \\input", r"x; \textbackslash{}input"),
    ],
)
def test_polynomials_are_set_as_maths(typed, latex):
    assert polynomial(typed).code == latex


KEYS = [
    "MauduitSarkozy1997", "GoubinMauduitSarkozy2004", "MauduitSarkozy2005", "ChungGrahamWilson1989",
    "Weil1948", "Schmidt1976", "BrouwerHaemers2012", "AlonKohayakawaMauduitMoreiraRodl2006",
    "Golomb1967", "Thomason1987", "FIPS180", "BurnikelEtAl2001", "Pratt1975",
]  # fmt: skip


def test_published_sources_are_complete():
    assert set(KEYS) <= set(published())
    for entry in published().values():
        assert {"author", "title", "year"} <= set(entry.fields), entry.key
        assert all(unprintable(text) is None for text in entry.fields.values())
        assert item(entry).code.endswith(".")


def test_bibtex_is_written_as_it_is_read():
    entries = tuple(published().values())
    text = bib_text(entries)
    assert text.isascii()
    assert read_bibtex(text) == entries
    assert "S{\\'{a}}rk{\\\"{o}}zy" in text


@pytest.mark.parametrize(
    "text",
    [
        "@misc{a, title = {\\input{x}}}", "@misc{a, title = {$x$}}", "@misc{a, title = {x}",
        "@program{a, title = {x}}", "@misc{a title = {x}}", "nothing", "", "@misc{a, t = {χ}}",
        "@misc{a, t={b}}@misc{c, t={d}}", "@misc{a b, t={x}}", "@misc{a, title = x}",
        "@misc{a, title = {\\write18{x}}}", "@misc{\\a, t={x}}",
    ],
)  # fmt: skip
def test_bibtex_of_an_author_is_data(text):
    assert check_bibtex(text) is not None


def test_accents_of_bibtex_are_composed():
    assert decoded("{\\'A}, \\\"o, \\v{c}, \\H o, {\\L}ukasiewicz, \\c{s}, {\\'{\\i}}, \\aa{}") == (
        "Á, ö, č, ő, Łukasiewicz, ş, í, å"
    )


def evaluated(latex, where):
    """Return what LaTeX with letters, sums, products, powers and fractions is worth."""
    text = latex.replace("\\sqrt{p}", "w").replace("C_2", "C").replace("B_0", "B")
    while "\\frac" in text:
        text = re.sub(r"\\frac\{((?:[^{}]|\{[^{}]*\})*)\}\{([^{}]*)\}", r"((\1)/(\2))", text)
    text = re.sub(r"\^\{([0-9]+)\}", r"**\1", text)
    text = re.sub(r"(?<=[A-Za-z0-9)])(?=[A-Za-z(])", "*", text)
    text = re.sub(r"(?<![0-9*])([0-9]+)(?=/)", r"\1", text)
    names = {letter: sympy.Rational(number) for letter, number in where.items()}
    return sympy.Rational(eval(text, {"__builtins__": {}}, names))


@pytest.mark.parametrize("name", sorted(identities.identities()))
def test_the_printed_identity_is_the_checked_one(name):
    found = identities.confirmed(name)
    letters = "abstndkrpEBCwT"
    where = {letter: 3 + 2 * place for place, letter in enumerate(letters)}
    for side in (found.left, found.right):
        worth = side.formula.subs({sympy.Symbol(x): number for x, number in where.items()})
        assert evaluated(side.latex, where) == worth, side.latex


def test_a_false_identity_stops_the_appendix(monkeypatch):
    n = sympy.Symbol("n")
    wrong = identities.Identity(identities.Side(n, "n"), identities.Side(n + 1, "n+1"))
    monkeypatch.setattr(identities, "identities", lambda: {"degree": wrong})
    with pytest.raises(identities.IdentityError):
        identities.printed("degree")


@pytest.mark.parametrize("p", [5, 13, 17, 29, 37])
def test_paley_sums(p):
    """The three sums by counting, against the printed formulas."""
    squares = {x * x % p for x in range(1, p)}
    rows = [[int((j - i) % p in squares) for j in range(p)] for i in range(p)]
    agreements = codegrees = walks = Fraction(0)
    for u in rows:
        for v in rows:
            both = sum(a & b for a, b in zip(u, v, strict=True))
            equal = sum(a == b for a, b in zip(u, v, strict=True))
            agreements += abs(equal - Fraction(p, 2))
            codegrees += abs(both - Fraction(p, 4))
            walks += both * both
    degree = sum(rows[0])
    cycles = walks - p * (2 * degree * degree - degree)
    for name, counted in [
        ("Paley agreements", agreements),
        ("Paley codegrees", codegrees),
        ("Paley four-cycles", cycles),
    ]:
        assert evaluated(identities.printed(name, "right").code, {"p": p}) == counted


@pytest.mark.parametrize(
    ("coefficients", "expected"),
    [
        ([1, 0, 0, 0, 3], 4**4 * 3**3),  # x^n + a: (-1)^(n(n-1)/2) n^n a^(n-1)
        ([1, 0, -5, 2], 4 * 5**3 - 27 * 2**2),  # x^3 + px + q: -4 p^3 - 27 q^2
        ([2, 3, 5], 3**2 - 4 * 2 * 5),  # a x^2 + bx + c: b^2 - 4ac
        ([1, -2, 1], 0),
    ],
)
def test_discriminants(coefficients, expected):
    found = identities.discriminant([Fraction(c) for c in coefficients])
    assert found.value == expected


@pytest.mark.parametrize(
    ("text", "simpler"),
    [
        ("n <= sqrt(3 + 2*sqrt(2))", "1 + \\sqrt{2}"),  # (1 + sqrt 2)^2 = 3 + 2 sqrt 2
        ("1/(sqrt(5) - 2) > n", "2 + \\sqrt{5}"),  # (sqrt 5 - 2)(sqrt 5 + 2) = 1
        ("n <= sqrt(2) + sqrt(3)", None),
        ("n <= sqrt(p)", None),
        ("n <= 12", None),
        ("n <= 1/(1 - 1)", None),
        ("n <= sqrt(2 - 3)", None),
        ("n <= log(2)*sqrt(4)", None),
    ],
)
def test_constant_bounds(text, simpler):
    remark = constant_remark(parse(text))
    assert (None if remark is None else remark.code.partition("=")[2]) == simpler


def test_primes_of_a_discriminant():
    found = identities.discriminant(
        [Fraction(1, 2), Fraction(0), Fraction(0), Fraction(0), Fraction(3, 2)]
    )
    assert (found.leading, found.primes) == (1, (2, 3))
    assert identities.discriminant([Fraction(1)]) is None
