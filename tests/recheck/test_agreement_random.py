"""The main tool and the re-checker agree on random small cases, claims of every operator included.

A case that the main tool refuses as input says nothing here; most are not refused.
"""

import contextlib
import io
import random

import pytest

from verifier.errors import CaseError
from verifier.progress import silent
from verifier.recheck.check import main as recheck
from verifier.run import check_case, read_all

SEQUENCE = ["balance", "well_distribution", "correlation(2)", "correlation(3)", "out_of_phase", "N"]
SUMS = [
    "complete_sum", "shifted_sum(2)", "incomplete_sum", "cyclic_incomplete_sum",
    "window_sum(0, p/2)", "window_sum(-3, p)", "p", "k", "r", "chi(3)", "leading(f)", "value(f, 2)",
]  # fmt: skip
GRAPH = [
    "edges", "density", "degree_min", "degree_max", "agreement_sum", "codegree_sum",
    "codegree_min", "codegree_max", "closed_walks(4)", "cycles(4)", "n",
]  # fmt: skip
POLYNOMIALS = ["x", "x^2+1", "x^3 - 2*x", "5*x^2+10", "3*x^4 + x^2/2 - 1", "(x+1)^2*(x - 3)", "7"]
PREDICATES = ["squarefree(f)", "even(f)", "odd(f)", "irreducible(f)", "prime(p + 2)"]
STRUCTURE = ["symmetric", "zero_diagonal", "zero_one", "regular"]
CONSTANTS = ["1", "2", "3", "1/2", "0.25", "5", "7", "4", "pi"]


def expression(draw, names, depth=3):
    if depth == 0 or draw.random() < 0.3:
        return draw.choice([*names, *CONSTANTS])

    def part():
        return expression(draw, names, depth - 1)

    forms = [
        lambda: f"({part()} {draw.choice('+-*')} {part()})",
        lambda: f"({part()})/({part()})",
        lambda: f"sqrt(abs({part()}))",
        lambda: f"({part()})^{draw.choice(['2', '3', '-1', '(1/2)', '(1/3)', '(3/2)'])}",
        lambda: f"{draw.choice(['floor', 'ceil', 'abs'])}({part()})",
        lambda: f"{draw.choice(['min', 'max'])}({part()}, {part()})",
        lambda: f"round({part()}, {draw.choice(['0', '1', '3', '-1'])})",
        lambda: f"(floor({part()}) mod {draw.choice('237')})",
        lambda: f"-{part()}",
        lambda: f"log(1 + abs({part()}))",
    ]
    return draw.choices(forms, [6, 2, 2, 2, 1, 1, 1, 1, 1, 1])[0]()


def condition(draw, names, predicates, depth=2):
    kind = draw.random()
    if depth == 0 or kind < 0.5:
        relation = draw.choice(["<=", "<", "=", "!=", ">=", ">"])
        return f"{expression(draw, names)} {relation} {expression(draw, names)}"
    if kind < 0.6 and predicates:
        return draw.choice(predicates)
    inner = condition(draw, names, predicates, depth - 1)
    if kind < 0.75:
        return f"not ({inner})"
    other = condition(draw, names, predicates, depth - 1)
    return f"({inner}) {draw.choice(['and', 'or'])} ({other})"


def construction(draw):
    """Return the text of the sections, the names and the predicates that a claim may use."""
    rule = draw.choice(["legendre", "legendre", "inverse", "random", "explicit", "file"])
    names, predicates, parameters, sequence = list(SEQUENCE), [], "", ""
    if rule in ("legendre", "inverse"):
        first = draw.choice([3, 5, 7, 11])
        listed = ", ".join(f'"{text}"' for text in draw.sample(POLYNOMIALS, 2))
        family = draw.choice(
            [
                f"polynomials = [{listed}]",
                "degree = 2, every = true, monic = true, squarefree = true",
                f"degree = 4, even = true, sample = 3, seed = {draw.randrange(99)}",
            ]
        )
        parameters = f"p = {{ primes = [{first}, {first + 4}] }}\nf = {{ {family} }}\n"
        sequence = f'rule = "{rule}"\npolynomial = "f"\nat-zero = {draw.choice([1, -1])}\n'
        names, predicates = names + SUMS, list(PREDICATES)
    elif rule == "random":
        lengths = ", ".join(map(str, draw.sample([1, 2, 3, 5, 9, 20, 65], 3)))
        parameters = f"m = {{ values = [{lengths}] }}\n"
        sequence = f'rule = "random"\nlength = "m"\nseed = {draw.randrange(50)}\n'
    elif rule == "explicit":
        signs = "".join(draw.choice("+-") for _ in range(draw.choice([1, 2, 4, 13])))
        sequence = f'rule = "explicit"\nvalues = "{signs}"\n'
    kind = "file" if rule == "file" else draw.choice(["circulant", "cayley-sum", ""])
    if sequence:
        sequence = f"[sequence]\n{sequence}" + draw.choice(["", 'symmetrise = "mirror"\n'])
        sequence += draw.choice(["", "", 'indices = "-3..4"\n'])
    graph = f'[graph]\nkind = "{kind}"\n' if kind else ""
    graph += 'file = "g.matrix"\n' if kind == "file" else ""
    if kind == "file":
        names = []
    if kind:
        names, predicates = names + GRAPH, predicates + STRUCTURE
    head = f"[parameters]\n{parameters}" if parameters else ""
    return head + sequence + graph, names, predicates


def random_case(seed):
    draw = random.Random(seed)
    text, names, predicates = construction(draw)
    define = (
        f'[define]\nA = "{expression(draw, names, 2)}"\nB = "A + {expression(draw, names, 1)}"\n'
    )
    names = [*names, "A", "B"]
    for number in range(4):
        says = condition(draw, names, predicates)
        text += f'[[claim]]\nname = "c{number}"\nsays = "{says}"\n'
        if draw.random() < 0.4:
            text += f'given = ["{condition(draw, names, predicates, 1)}"]\n'
    columns = f'"{draw.choice(names[:1])}", "round({expression(draw, names, 2)}, 2)"'
    text += f'[[table]]\nname = "t"\ncolumns = [{columns}]\n'
    size = draw.randint(1, 6)
    matrix = [[0] * size for _ in range(size)]
    for i in range(size):
        for j in range(i):
            matrix[i][j] = matrix[j][i] = draw.randint(0, 1)
    if draw.random() < 0.2:
        matrix[draw.randrange(size)][draw.randrange(size)] = draw.choice([1, 2])
    rows = "\n".join(" ".join(map(str, row)) for row in matrix)
    return 'format = 1\ntitle = "Random"\n' + define + text, rows + "\n"


@pytest.mark.parametrize("block", range(4))
def test_random_cases(block, tmp_path):
    agreed = 0
    for seed in range(20 * block, 20 * block + 20):
        text, matrix = random_case(seed)
        (tmp_path / "g.matrix").write_text(matrix)
        (tmp_path / "random.toml").write_text(text)
        try:
            [case] = read_all([tmp_path / "random.toml"])
            check_case(case, tmp_path / "out", 1, silent)
        except CaseError:
            continue
        said = io.StringIO()
        with contextlib.redirect_stdout(said), contextlib.redirect_stderr(said):
            status = recheck([str(tmp_path / "out")])
        assert status == 0, f"seed {seed}: {said.getvalue()}\n{text}"
        agreed += 1
    assert agreed >= 10
