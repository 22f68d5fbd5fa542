"""Reading and printing expressions: precedence as in common mathematical practice, no source."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from verifier.errors import ExpressionError
from verifier.expressions.latex import to_latex
from verifier.expressions.names import calls, expand, names
from verifier.expressions.parse import check_exponents, parse
from verifier.expressions.text import to_text
from verifier.expressions.tree import Binary, Call, Name, Negative, Number

SHOWN = [
    ("1+2*3", "1 + 2*3"),
    ("(1+2)*3", "(1 + 2)*3"),
    ("a-(b-c)", "a - (b - c)"),
    ("a - b - c", "a - b - c"),
    ("a/(b*c)", "a/(b*c)"),
    ("a/b/c", "a/b/c"),
    ("-a^2", "-a^2"),
    ("(-a)^2", "(-a)^2"),
    ("a^-b", "a^-b"),
    ("a^b^c", "a^b^c"),
    ("(a^b)^c", "(a^b)^c"),
    ("-a*b", "-a*b"),
    ("a*-b", "a*-b"),
    ("a mod 4 = 1", "a mod 4 = 1"),
    ("not a<b and c>=d or e!=f", "not a < b and c >= d or e != f"),
    ("a<b and (c<d or e<f)", "a < b and (c < d or e < f)"),
    ("not (a<b and c<d)", "not (a < b and c < d)"),
    ("correlation( 2 )<=x1", "correlation(2) <= x1"),
    ("induced('C~') > 0", "induced('C~') > 0"),
    ("((((a))))", "a"),
]


@pytest.mark.parametrize(("text", "shown"), SHOWN)
def test_canonical_text(text, shown):
    assert to_text(parse(text)) == shown
    assert parse(shown) == parse(text)


REFUSED = [  # text, the column of the caret, a word of the hint
    ("a == b", 2, "="),
    ("a ** b", 2, "^"),
    ("a && b", 2, "and"),
    ("a || b", 2, "or"),
    ("2x", 1, "*"),
    ("1e3", 1, "1e3"),
    (".5", 0, "both sides"),
    ("5.", 1, "both sides"),
    ("1_000", 1, "_"),
    ("0x10", 1, "letter"),
    ("a # b", 2, "comments"),
    ("a < b < c", 6, "a < b and b < c"),
    ("a +", 3, "the end"),
    ("(a", 2, ")"),
    ("a)", 1, "operator"),
    ("", 0, "the end"),
    ("a b", 2, "operator"),
    ("f()", 2, "number"),
    ("f(a,)", 4, "number"),
    ("+a", 0, "number"),
    ("a^--b", 3, "sign"),
    ("'C~'", 0, "number"),
    ("sqrt('C~')", 5, "induced"),
    ("induced('C~", 8, "quoted"),
    ("a = \N{GREEK SMALL LETTER PI}", 4, "ASCII"),
    ("a\0b", 1, "cannot"),
    ("a; b", 1, "cannot"),
    ("a[0]", 1, "cannot"),
    ("a.b", 1, "both sides"),
    ("a" * 401, 400, "400"),
    ("+".join(["a"] * 150), 0, "200"),
    ("-" * 50 + "a", 40, "depth"),
    ("(" * 200, 40, "depth"),
    ("not " * 60 + "a < b", 160, "depth"),
]


@pytest.mark.parametrize(("text", "column", "word"), REFUSED)
def test_refusals_point_at_the_column(text, column, word):
    with pytest.raises(ExpressionError) as caught:
        parse(text)
    assert (caught.value.column, word in caught.value.problem) == (column, True)
    assert caught.value.pointed().splitlines()[1].endswith("^")


def test_ten_thousand_parentheses_are_refused_at_once():
    with pytest.raises(ExpressionError):
        parse("(" * 10_000 + "1" + ")" * 10_000)


@pytest.mark.parametrize("text", ["2^65", "9^9^9", "a^(60 + 5)", "2^-65", "a^(2^7)", "x^(65/1)"])
def test_constant_exponents_above_64_are_refused(text):
    with pytest.raises(ExpressionError, match="64"):
        check_exponents(parse(text), text)


@pytest.mark.parametrize("text", ["2^64", "a^n", "2^(n^2)", "a^(5/2)", "2^-64"])
def test_other_exponents_are_not(text):
    check_exponents(parse(text), text)


NUMBERS = st.fractions(min_value=0, max_value=50, max_denominator=1).map(Number)
TREES = st.recursive(
    NUMBERS | st.sampled_from(["a", "b", "pi"]).map(Name),
    lambda inner: (
        st.builds(Binary, st.sampled_from(["+", "-", "*", "/", "mod"]), inner, inner)
        | st.builds(Negative, inner)
        | st.builds(Binary, st.just("^"), inner, inner)
        | st.builds(Call, st.just("max"), st.tuples(inner, inner))
    ),
    max_leaves=12,
)


@given(TREES)
def test_reading_undoes_printing(tree):
    assert parse(to_text(tree)) == tree


@given(TREES)
def test_latex_has_balanced_braces(tree):
    made = to_latex(tree, {}, {})
    assert made.count("{") == made.count("}")
    assert made.count(r"\left(") == made.count(r"\right)")


def test_abbreviations_are_expanded_within_limits():
    definitions = {"B": parse("a + b")}
    assert to_text(expand(parse("B*B <= c"), definitions)) == "(a + b)*(a + b) <= c"
    big = {"B": parse("+".join(["a"] * 60))}
    with pytest.raises(ExpressionError, match="expanded"):
        expand(parse("B*B"), big)


def test_names_and_calls_in_the_order_of_the_text():
    tree = parse("correlation(2) + m <= correlation(l) and symmetric")
    assert names(tree) == {"correlation", "m", "l", "symmetric"}
    assert [name for name, _ in calls(tree, {"correlation", "symmetric"})] == [
        "correlation", "correlation", "symmetric",
    ]  # fmt: skip


LATEX = [
    ("(2*k - 1)*sqrt(p)/2 <= n^2", r"\frac{\left(2 k - 1\right) \sqrt{p}}{2} \le n^{2}"),
    ("floor(2*sqrt(p)) != abs(a)", r"\lfloor 2 \sqrt{p}\rfloor \ne \lvert a\rvert"),
    ("p mod 4 = 1", r"p \bmod 4 = 1"),
    ("2*3 < 1/2", r"2 \cdot 3 < \frac{1}{2}"),
    ("binomial(n, 2)", r"\binom{n}{2}"),
    ("log(4*p/pi)", r"\log\left(\frac{4 p}{\pi}\right)"),
]


@pytest.mark.parametrize(("text", "latex"), LATEX)
def test_latex_of_usual_formulas(text, latex):
    assert to_latex(parse(text), {}, {}) == latex
