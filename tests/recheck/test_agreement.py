"""The main tool and the independent re-checker agree on cases of every kind.

Two programs that share no code and were written from the definitions alone: each is the other's
outside check.
"""

import contextlib
import io

import pytest

from verifier.progress import silent
from verifier.recheck.check import main as recheck
from verifier.run import check_case, read_all

GRAPH_CLAIMS = """
[measure]
quantities = ["edges", "density", "degree_min", "degree_max", "agreement_sum", "codegree_sum", "codegree_min", "codegree_max", "closed_walks(4)", "cycles(4)", "regular"]
[[claim]]
name = "spread"
says = "codegree_max - codegree_min <= sqrt(n) + log(n + 1) and not density > 2/3 or degree_max = 0"
[[claim]]
name = "bounded"
says = "agreement_sum <= n^3/2"
"""
SEQUENCE_CLAIMS = """
[measure]
quantities = ["balance", "well_distribution", "correlation(2)", "correlation(3)", "out_of_phase"]
[[claim]]
name = "small"
says = "correlation(2) < 3*sqrt(N)*log(N + 2)^(1/2) + 1"
[[claim]]
name = "other"
says = "well_distribution >= N/4"
"""
SUMS = """
[measure]
quantities = ["complete_sum", "shifted_sum(2)", "incomplete_sum", "cyclic_incomplete_sum", "window_sum(-p/3, 2*p + 1/2)", "squarefree(f)", "even(f)", "odd(f)", "irreducible(f)", "prime(p*p - 2)"]
[[claim]]
name = "weil"
says = "abs(complete_sum) <= (k - 1)*sqrt(p)"
given = ["squarefree(f)", "k < p"]
[[claim]]
name = "floor"
says = "abs(complete_sum + chi(leading(f))) <= (k - 2)*floor(2*sqrt(p))/2 or k mod 2 = 1"
given = ["squarefree(f)"]
[[table]]
name = "values"
columns = ["p", "f", "value(f, 3)", "round(shifted_sum(2)/sqrt(p), 5)", "irreducible(f)"]
"""
LEGENDRE = '[sequence]\nrule = "legendre"\npolynomial = "f"\n'
CIRCULANT = '[graph]\nkind = "circulant"\n'
PRIMES = "[parameters]\np = { primes = [3, 31] }\n"

CASES = {
    "legendre-circulant": PRIMES + 'f = { polynomials = ["x", "x^2 + 1", "x^3 - 2*x"] }\n' + LEGENDRE + CIRCULANT + GRAPH_CLAIMS,
    "legendre-sums": PRIMES + 'f = { polynomials = ["x^4/2 + 3*x - 1/7", "5*x^2 + 10", "15", "(x + 1)^3"] }\n' + LEGENDRE + SUMS,
    "every": "[parameters]\np = { values = [5] }\nf = { degree = 3, every = true }\n" + LEGENDRE + SUMS,
    "sample": "[parameters]\np = { primes = [7, 23], class = [3, 4] }\nf = { degree = 4, even = true, monic = true, squarefree = true, sample = 6, seed = 11 }\n" + LEGENDRE + SUMS,
    "where": '[parameters]\np = { primes = [5, 40] }\nd = { values = [1, 2] }\nf = { polynomials = ["x^2 - d"] }\nwhere = ["p mod 3 = 1 or r = 0", "k = 2"]\n' + LEGENDRE + SUMS,
    "mirror": PRIMES + '[sequence]\nrule = "legendre"\npolynomial = "x^2 + x"\nat-zero = -1\nsymmetrise = "mirror"\nindices = "1..p-1"\n' + CIRCULANT + GRAPH_CLAIMS + '[[claim]]\nname = "row"\nsays = "row_out_of_phase <= n"\n',
    "inverse": PRIMES + '[sequence]\nrule = "inverse"\npolynomial = "x^3 + 2"\nindices = "-p..2*p"\n' + SEQUENCE_CLAIMS,
    "cayley-sum": '[parameters]\np = { primes = [3, 23] }\n[sequence]\nrule = "inverse"\npolynomial = "x"\nat-zero = 1\n[graph]\nkind = "cayley-sum"\n' + GRAPH_CLAIMS,
    "random": '[parameters]\nN0 = { values = [1, 2, 3, 64, 65, 130] }\ns = { values = [0, 7] }\n[sequence]\nrule = "random"\nlength = "N0"\nseed = "s"\n' + SEQUENCE_CLAIMS,
    "random-graph": '[parameters]\nm = { values = [1, 2, 9, 70] }\n[sequence]\nrule = "random"\nlength = "m"\nseed = 3\nsymmetrise = "mirror"\n' + CIRCULANT + GRAPH_CLAIMS,
    "explicit": '[sequence]\nrule = "explicit"\nvalues = "+++++--++-+-+"\n' + SEQUENCE_CLAIMS,
    "bits": '[sequence]\nrule = "explicit"\nfile = "bits.txt"\nindices = "3..40"\n' + SEQUENCE_CLAIMS,
    "matrix": '[graph]\nkind = "file"\nfile = "small.matrix"\n' + GRAPH_CLAIMS,
    "unsymmetric": '[graph]\nkind = "file"\nfile = "unsymmetric.matrix"\n' + GRAPH_CLAIMS,
    "looped": '[graph]\nkind = "file"\nfile = "looped.edges"\n' + GRAPH_CLAIMS,
    "graph6": '[graph]\nkind = "file"\nfile = "petersen.g6"\n' + GRAPH_CLAIMS,
    "sparse6": '[graph]\nkind = "file"\nfile = "petersen.s6"\n' + GRAPH_CLAIMS,
    "functions": '[parameters]\np = { primes = [3, 17] }\nf = { polynomials = ["x^3 + 2*x + 1", "3*x^5 - 1", "x^2/4 + x", "15*x + 2"] }\n' + LEGENDRE
    + "".join(
        f'[[claim]]\nname = "c{i}"\nsays = "{says}"\n'
        for i, says in enumerate(
            [
                "disc(f) = 0", "chi(disc(f) + balance) != 1", "binomial(balance - 9, 2) > 0", "binomial(9, balance - 9) >= 0",
                "factorial(balance - 5) < 10^9", "value(f, balance/2) < p", "chi(balance/3) = 0", "(balance mod (balance - 3)) = 0",
                "sqrt(balance - 3) + log(balance - 5) < 100", "1/(complete_sum - 1) < 1 and balance > 0", "(complete_sum)^(1/3) < 2",
                "0^(complete_sum) < 2", "round(balance/8, balance - 3) < 4", "window_sum(sqrt(p), p - log(p)) < 5", "prime(balance) or prime(2^5 - 1)",
                "exp(balance/7) > 2^(balance/7) and floor(pi*balance) < 4*balance", "leading(f)*chi(2) <= p - 1", "max(complete_sum, -complete_sum, 1) <= p",
            ]
        )
    ),
    "prime-powers": '[parameters]\nq = { prime-powers = [4, 30], class = [1, 4] }\n[sequence]\nrule = "random"\nlength = "q"\nseed = "p"\n' + SEQUENCE_CLAIMS + '[[table]]\nname = "t"\ncolumns = ["q", "p", "chi(2)"]\n',
    "expected": '[parameters]\np = { values = [5, 13] }\n[[table]]\nname = "t"\ncolumns = ["p", "round(p/3, 2)"]\nexpect = "expected.csv"\n',
    "undecided": '[parameters]\np = { primes = [5, 13] }\n[define]\nL = "log(8)/log(2)"\nS = "sqrt(2)*sqrt(2)"\n' + '[sequence]\nrule = "legendre"\npolynomial = "x"\n'
    + '[[claim]]\nname = "a"\nsays = "L <= 3"\n[[claim]]\nname = "b"\nsays = "S < 2 or balance >= 0"\n[[claim]]\nname = "c"\nsays = "exp(log(N)) >= 2"\n'
    + '[[claim]]\nname = "d"\nsays = "1/(balance - 1) > 0"\n[[claim]]\nname = "e"\nsays = "balance < floor(L)"\ngiven = ["exp(log(5)) = 5"]\n[[claim]]\nname = "g"\nsays = "not L = 3 and balance != 0"\n',
}  # fmt: skip
FILES = {
    "expected.csv": "a,b\r\n\r\n5,1.67\r\n13, 4.33\r\n7,8,9\r\n",
    "bits.txt": "0110 1001, 1001\n0110",
    "small.matrix": "0110\n1010\n1100\n0000\n",
    "unsymmetric.matrix": "0 1 0\n0 0 1\n1, 0, 0\n",
    "looped.edges": "# a path with a loop\n0 1\n1 2\n2 2\n1 0\n",
    "petersen.g6": "IheA@GUAo\n",  # the Petersen graph as networkx writes it
    "petersen.s6": ":I`ESgTlYF\n",  # a graph on ten vertices in sparse6
}


@pytest.mark.parametrize("name", sorted(CASES))
def test_two_programs_agree(name, tmp_path):
    for file, text in FILES.items():
        (tmp_path / file).write_text(text)
    (tmp_path / f"{name}.toml").write_text('format = 1\ntitle = "Agreement"\n' + CASES[name])
    [case] = read_all([tmp_path / f"{name}.toml"])
    check_case(case, tmp_path / "out", 1, silent)
    said = io.StringIO()
    with contextlib.redirect_stdout(said), contextlib.redirect_stderr(said):
        status = recheck([str(tmp_path / "out")])
    assert status == 0, said.getvalue()
