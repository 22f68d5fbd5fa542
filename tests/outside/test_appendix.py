"""The appendix of hand-made results: certificates here are computed from the definitions, naively."""

import hashlib
import json
import os
import re
import shutil
import subprocess
from fractions import Fraction
from math import isqrt

import pytest

from verifier import catalogue
from verifier.appendix.compile import compile_pdf
from verifier.appendix.write import appendix_text, documents
from verifier.case.case import (
    Case,
    Claim,
    Condition,
    GraphTable,
    Polynomials,
    Primes,
    SequenceTable,
    Source,
    Table,
)
from verifier.errors import ToolError
from verifier.expressions.parse import parse
from verifier.registry import GRAPHS, PREDICATES, QUANTITIES, RULES
from verifier.typography.bibtex import read_bibtex
from verifier.typography.escape import unprintable

requires_latex = pytest.mark.skipif(
    shutil.which("pdflatex") is None and "CI" not in os.environ,
    reason="pdflatex is not installed; in continuous integration this is a failure",
)
catalogue.load()

DIGESTS = {
    name: hashlib.sha256(name.encode()).hexdigest()
    for name in ("summary.json", "certificates.jsonl", "case.toml", "recheck/__main__.py")
}
ALLOWED = {
    "fontenc", "lmodern", "amsmath", "amssymb", "amsthm", "mathtools", "booktabs", "longtable",
    "array", "xcolor", "microtype", "hyperref", "url",
}  # fmt: skip


def condition(text):
    tree = parse(text)
    return Condition(text, tree, tree)


def chi(a, p):
    a %= p
    return 0 if a == 0 else 1 if pow(a, (p - 1) // 2, p) == 1 else -1


def root(square):
    """Return sqrt(square), no square, by its floor and ceiling at 12 significant digits."""
    places = 12 - len(str(isqrt(square)))
    whole = isqrt(square * 10 ** (2 * places))

    def text(number):
        return f"{number // 10**places}.{number % 10**places:0{places}}"

    return {"lower": text(whole), "upper": text(whole + 1)}


def measured(p, f):
    """Return quantities and witnesses of the circulant graph of chi(f), from the definitions."""
    e = [chi(f(x), p) or 1 for x in range(p)]
    z = [0] + [(1 + sign) // 2 for sign in e[1:]]
    a = [[z[(j - i) % p] for j in range(p)] for i in range(p)]
    pairs = [(u, v) for u in a for v in a]
    agreement = sum(
        abs(sum(x == y for x, y in zip(u, v, strict=True)) - Fraction(p, 2)) for u, v in pairs
    )
    both = [sum(x * y for x, y in zip(u, v, strict=True)) for u, v in pairs]
    codegree = sum(abs(common - Fraction(p, 4)) for common in both)
    degree = sum(z)
    best, at = 0, None
    for first in range(p):
        for second in range(first + 1, p):
            total = 0
            for m in range(1, p - second + 1):
                total += e[first + m - 1] * e[second + m - 1]
                if abs(total) > best:
                    best, at = abs(total), (first, second, m)
    unsymmetric = [(i, j) for i in range(p) for j in range(p) if a[i][j] != a[j][i]]
    quantities = {
        "agreement_sum": str(agreement),
        "codegree_sum": str(codegree),
        "cycles(4)": str(sum(c * c for c in both) - p * (2 * degree * degree - degree)),
        "correlation(2)": str(best),
        "symmetric": not unsymmetric,
        "zero_diagonal": True,
        "zero_one": True,
        "squarefree(f)": True,
    }
    witnesses = {"correlation(2)": list(map(str, at))}
    if unsymmetric:
        witnesses["symmetric"] = list(map(str, unsymmetric[0]))
    return quantities, witnesses


def relation(left, right, *, holds, ratio=None, trivial=False):
    return {
        "verdict": "holds" if holds else "fails", "trivial": trivial, "left": left, "right": right,
        "ratio": ratio, "by": "rational" if isinstance(right, str) else "surd",
    }  # fmt: skip


def certificate(index, p, typed, reduced, f, degree, claims, **more):
    quantities, witnesses = measured(p, f)
    found = {
        "case": "paley", "format": 1, "index": index, "parameters": {"p": str(p), "f": typed},
        "definition": {
            "rule": "legendre", "polynomial": reduced, "at-zero": "1", "indices": f"0..{p - 1}",
            "symmetrise": "none", "graph": "circulant",
        },
        "primality": {}, "quantities": quantities, "witnesses": witnesses,
        "known": {
            "p": str(p), "n": str(p), "N": str(p), "k": str(degree),
            "r": str(sum(f(x) % p == 0 for x in range(p))),
        },
        "tables": {"small": [str(p), typed, quantities["agreement_sum"], "0.5814"]}, **more,
    }  # fmt: skip
    found["claims"] = {name: judge(found) for name, judge in claims.items()}
    return found


def summary_of(case, certificates):
    order = ("fails", "open", "holds", "outside")
    claims = []
    for claim in case.claims:
        judged = [found["claims"][claim.name] for found in certificates]
        failing = [
            found["parameters"]
            for found, one in zip(certificates, judged, strict=True)
            if one["verdict"] == "fails"
        ]
        rated = [
            (Fraction(one["ratio"] if isinstance(one["ratio"], str) else one["ratio"]["lower"]), i)
            for i, one in enumerate(judged)
            if one.get("ratio")
        ]
        tightest = max(rated, key=lambda pair: (pair[0], -pair[1]))[1] if rated else None
        claims.append(
            {
                "name": claim.name,
                "verdict": min((one["verdict"] for one in judged), key=order.index),
                **{word: sum(one["verdict"] == word for one in judged) for word in order},
                "trivial": sum(one["trivial"] for one in judged),
                "tightest": None
                if tightest is None
                else {
                    "parameters": certificates[tightest]["parameters"],
                    "ratio": judged[tightest]["ratio"],
                },
                "failures": {
                    "count": len(failing),
                    "first": failing[0] if failing else None,
                    "last": failing[-1] if failing else None,
                    "holds_from": None,
                },
            }
        )
    return {
        "format": 1, "case": case.name, "instances": [], "claims": claims,
        "verdict": min((claim["verdict"] for claim in claims), key=order.index),
        "tables": [{"name": t.name, "verdict": "holds", "differences": []} for t in case.tables],
    }  # fmt: skip


LONG = (
    "cycles(4) <= n^4/16 - n^3 - 12345678901234567890 + agreement_sum*codegree_sum"
    " - 3*agreement_sum^2 + codegree_sum*n^2 - n*(n - 1)*(n - 2)*(n - 3)/17 + codegree_sum/13"
)


def a_case(**changes):
    fields = {
        "name": "paley",
        "title": "Circulant graphs & 50% of Erdős",
        "about": "The row_0 costs $5.\n\nNothing else.",
        "parameters": (
            Primes("p", 5, 17, 1, 4, powers=False),
            Polynomials("f", ("x", "x^4 + 3"), (parse("x"), parse("x^4 + 3"))),
        ),
        "where": (condition("p > k"),),
        "define": {"B": condition("((2*k - 1)*sqrt(p))/2 + r + 2")},
        "sequence": SequenceTable(
            "legendre", {"polynomial": condition("f"), "at-zero": 1}, None, "none"
        ),
        "graph": GraphTable("circulant", {}),
        "measure": (condition("codegree_sum"),),
        "claims": (
            Claim(
                "agreement",
                condition("agreement_sum <= n^2/2 + n*(n-1)*B"),
                (condition("squarefree(f)"), condition("p > 3")),
                "lemma-3",
            ),
            Claim("order-two", condition("correlation(2) <= 2*k*sqrt(p)"), (), None),
            Claim("too-strong", condition(LONG), (), "paper"),
            Claim("shape", condition("symmetric and zero_diagonal"), (), None),
        ),
        "tables": (
            Table(
                "small",
                tuple(map(condition, ("p", "f", "agreement_sum", "round(agreement_sum/n^3, 4)"))),
                ("$p$", "$f$", "$\\Sigma$", "50% ratio"),
                "small.csv",
            ),
        ),
        "sources": {
            "lemma-3": Source("lemma-3", "Lemma 3 of the accompanying report", None),
            "paper": Source(
                "paper",
                "Theorem 1",
                "@article{paper, title = {On {G}ra{\\'\\i}d\\'e graphs}, year = 1901}",
            ),
        },
        "notation": {"agreement_sum": "\\Sigma_6(G)"},
        "text": b"",
        "inputs": {},
    }
    return Case(**{**fields, **changes})


def nothing_decided(found):
    return {
        "verdict": "open", "trivial": False, "left": None, "right": None, "ratio": None, "by": None,
        "reason": "undecided at 4096 bits",
    }  # fmt: skip


def both_parts(found):
    says = {name: found["quantities"][name] for name in ("symmetric", "zero_diagonal")}
    parts = [{"says": name, "verdict": "holds" if good else "fails"} for name, good in says.items()]
    verdict = "holds" if all(says.values()) else "fails"
    return {"verdict": verdict, "trivial": False, "parts": parts}


CLAIMS = {
    "agreement": lambda found: relation(
        found["quantities"]["agreement_sum"],
        root(int(found["known"]["p"]) ** 7),
        holds=True,
        ratio={"lower": "0.581411123456", "upper": "0.581411123457"},
        trivial=found["known"]["p"] == "5",
    ),
    "order-two": lambda found: (
        nothing_decided(found)
        if found["known"]["p"] == "17"
        else relation(found["quantities"]["correlation(2)"], "47/2", holds=True, ratio="2/47")
    ),
    "too-strong": lambda found: relation(
        found["quantities"]["cycles(4)"], "-" + "1234567890" * 5 + "/" + "7" * 30, holds=False
    ),
    "shape": both_parts,
}


def the_certificates(claims=CLAIMS):
    made = []
    for p in (5, 13, 17):
        made.append(certificate(len(made), p, "x", "x", lambda x: x, 1, claims))
        made.append(
            certificate(len(made), p, "x^4 + 3", f"x^4 + {3 % p}", lambda x: x**4 + 3, 4, claims)
        )
    return made


CASE = a_case()
CERTIFICATES = the_certificates()
SUMMARY = summary_of(CASE, CERTIFICATES)


@pytest.fixture(scope="module")
def text():
    return appendix_text(CASE, SUMMARY, CERTIFICATES, DIGESTS)


def flat(source):
    return " ".join(source.replace("\\allowbreak", "").split())


def test_source_is_ascii_in_short_lines(text):
    assert text.isascii()
    assert max(map(len, text.splitlines())) <= 200
    assert "\n\n\n" not in text
    assert text.endswith("\n")


def test_only_common_packages(text):
    assert set(re.findall(r"\\usepackage(?:\[[^]]*\])?\{([^}]*)\}", text)) <= ALLOWED
    assert "\\today" not in text
    assert "shell" not in text


def test_order_of_the_parts(text):
    heads = re.findall(r"\\section\{([^}]*)\}", text)
    assert heads == [
        "What was checked", "Notation", "Hypotheses", "Claims", "Why such statements are true",
        "Verdicts", "Tightest instances", "Failures and open questions", "Tables", "Certificates",
        "Files, and how to check again", "Limits of what is claimed",
    ]  # fmt: skip


def test_title_and_about_are_escaped(text):
    assert "]{Circulant graphs \\& 50\\% of Erd\\H{o}s}" in text
    assert "The row\\_0 costs \\$5. Nothing else." in text


def test_paley_values_are_printed(text):
    # p(3p-2)/2, proved in every textbook's two lines from the strongly regular parameters
    for p in (5, 13, 17):
        assert f"{p * (3 * p - 2)}/2" in text


def test_every_instance_stands_in_each_certificate_table(text):
    digests = [
        hashlib.sha256(
            (
                json.dumps(c, sort_keys=True, separators=(",", ":"), ensure_ascii=False) + "\n"
            ).encode()
        ).hexdigest()[:12]
        for c in CERTIFICATES
    ]
    for digest in digests:
        assert text.count(digest) == len(CASE.claims) + 1  # and among what was measured


def test_verdicts_in_words_and_squares(text):
    flattened = flat(text)
    assert "\\blacksquare" in text
    assert "\\primewisefails{} (6 fails)" in flattened
    assert "\\primewiseopen{} (4 holds, 2 open)" in flattened
    assert "at 2 of 6 instances it holds, but says nothing here: the bound exceeds the trivial" in (
        flattened
    )
    assert "undecided at 4096 bits" in flattened


def test_a_failure_names_its_witnesses():
    claims = {**CLAIMS, "shape": both_parts}
    found = certificate(0, 7, "x", "x", lambda x: x, 1, claims)
    assert found["quantities"]["symmetric"] is False  # 7 = 3 mod 4
    made = flat(appendix_text(CASE, summary_of(CASE, [found]), [found], DIGESTS))
    assert "\\texttt{symmetric} fails" in made
    first, second = found["witnesses"]["symmetric"]
    assert re.search(
        rf"\\texttt{{symmetric}} is false is seen at \$[^$]*={first}\$, \$[^$]*={second}\$", made
    )
    assert "Throughout, the row is not symmetric" in made


def test_the_three_cautions(text):
    flattened = flat(text)
    for caution in (
        "A finite check is no proof beyond its range",
        "Theorems that are cited are cited, not proved here",
        "Small correlation is no evidence of cryptographic strength",
    ):
        assert caution in flattened


def test_how_to_check_again(text):
    assert "\\texttt{sha256sum -c digests.txt}" in text
    assert "\\texttt{python3 -E -S -m recheck .}" in text
    for name, digest in DIGESTS.items():
        assert digest in text.replace("\\allowbreak ", ""), name


def test_only_what_is_cited_is_listed(text):
    cited = {
        key
        for keys in re.findall(r"\\cite(?:\[[^]]*\])?\{([^}]*)\}", text)
        for key in keys.split(",")
    }
    listed = re.findall(r"\\bibitem\{([^}]*)\}", text)
    assert set(listed) == cited
    assert len(listed) == len(set(listed))
    _, bibliography = documents(CASE, SUMMARY, CERTIFICATES, DIGESTS)
    assert bibliography.isascii()
    assert {entry.key for entry in read_bibtex(bibliography)} == cited


def test_sketches_follow_the_case(text):
    flattened = flat(text)
    assert "At 3 of 6 instances ($p=5$, $f=x^{4}+ 3$" in flattened
    assert "$f$ is even modulo $p$" in flattened
    assert "$f$ is odd modulo $p$ and $p\\equiv 1" in flattened
    assert "Weil's theorem" in flattened
    assert "Paley graph" not in flattened  # half of the polynomials are x, half are not
    plain_case = a_case(claims=CASE.claims[3:], measure=())
    bare = [
        {**c, "quantities": {"symmetric": True, "zero_diagonal": True}, "witnesses": {}}
        for c in CERTIFICATES
    ]
    made = flat(appendix_text(plain_case, summary_of(plain_case, bare), bare, {}))
    assert "Weil" not in made
    assert "The row is symmetric" in made


def test_the_paley_graph_is_recognised():
    only = [c for c in CERTIFICATES if c["definition"]["polynomial"] == "x"]
    made = flat(appendix_text(CASE, summary_of(CASE, only), only, {}))
    assert "\\frac{p(3p-2)}{2}" in made
    assert "BrouwerHaemers2012" in made


def test_discriminants_exclude_primes(text):
    # disc(x^4 + 3) = 4^4 3^3
    assert "\\operatorname{disc}=6912" in text
    assert "excluded primes $2$, $3$; no prime of this case" in flat(text)


def many(count):
    return [
        {**CERTIFICATES[0], "index": i, "parameters": {"p": str(i), "f": "x"}} for i in range(count)
    ]


def rows_in(text):
    return len(re.findall(r"\\scriptsize\\ttfamily", text))


def test_beyond_five_thousand_rows_some_are_left_out_and_said_so():
    case = a_case(claims=CASE.claims[:1], measure=())
    found = many(5001)
    summary = summary_of(case, found)
    cut = appendix_text(case, summary, found, {})
    assert rows_in(cut) == 100  # the first and last 50, the tightest among them
    assert "100 of 5001 instances" in flat(cut)
    assert rows_in(appendix_text(case, summary, found, {}, all_rows=True)) == 5001
    fitting = found[:5000]
    assert rows_in(appendix_text(case, summary_of(case, fitting), fitting, {})) == 5000


def test_the_fragment_goes_into_a_host():
    made = appendix_text(CASE, SUMMARY, CERTIFICATES, DIGESTS, fragment=True)
    assert made.startswith("%")
    assert "\\documentclass" not in made
    assert "\\begin{document}" not in made
    assert not re.search(r"^[^%]*\\usepackage", made, re.MULTILINE)
    assert "%   \\usepackage{longtable}" in made
    assert "\\subsection{Claims}" in made


def test_an_empty_case_and_one_without_sequence():
    case = a_case(
        parameters=(), where=(), define={}, claims=(), tables=(), sequence=None,
        graph=GraphTable("file", {"file": "a_b.g6"}), about="",
    )  # fmt: skip
    found = {
        "case": "paley", "format": 1, "index": 0, "parameters": {}, "primality": {},
        "definition": {"graph": "file", "file": "a_b.g6"}, "known": {"n": "4"},
        "quantities": {"codegree_sum": "12"}, "witnesses": {}, "claims": {},
    }  # fmt: skip
    summary = {"claims": [], "tables": [], "verdict": "holds"}
    made = flat(appendix_text(case, summary, [found], {}))
    assert "\\texttt{a\\_b.g6}" in made
    assert "the case is one instance" in made
    assert "\\section{Claims}" not in made


def test_instances_without_a_sequence_are_outside():
    reason = "f vanishes identically modulo 5"
    gone = {
        "case": "paley", "format": 1, "index": 0, "parameters": {"p": "5", "f": "5*x"},
        "primality": {}, "definition": {"rule": "legendre"}, "known": {"p": "5"}, "reason": reason,
        "quantities": {}, "witnesses": {}, "tables": {"small": ["outside"] * 4},
        "claims": {
            claim.name: {
                "verdict": "outside", "trivial": False, "left": None, "right": None, "ratio": None,
                "by": None, "reason": reason,
            }
            for claim in CASE.claims
        },
    }  # fmt: skip
    made = flat(appendix_text(CASE, summary_of(CASE, [gone]), [gone], {}))
    assert "no instance meets the hypotheses" in made
    assert "At 1 of them there is no sequence" in made


def test_texts_of_the_registries_can_be_printed():
    for registry in (RULES, GRAPHS, QUANTITIES, PREDICATES):
        for entry in registry.entries.values():
            assert unprintable(f"{entry.definition} {entry.source}") is None, entry.name


@requires_latex
def test_symbols_of_the_registries_are_maths(tmp_path):
    body = []
    for registry in (QUANTITIES, PREDICATES):
        for entry in registry.entries.values():
            filled = entry.symbol
            for place in range(len(entry.arguments)):
                filled = filled.replace(f"{{{place}}}", "{2}")
            body.append(f"${filled}$")
    assert body
    packages = "\\usepackage{amsmath,amssymb}"
    page = f"\\documentclass{{amsart}}{packages}\\begin{{document}}\n%s\n\\end{{document}}\n"
    (tmp_path / "appendix.tex").write_text(page % "\n\n".join(body), encoding="ascii")
    assert "Missing character" not in log_of(tmp_path, "appendix")


def test_same_results_same_bytes(text):
    def turned(document):
        if isinstance(document, list):
            return [turned(item) for item in document]
        if isinstance(document, dict):
            return {name: turned(document[name]) for name in sorted(document, reverse=True)}
        return document

    again = appendix_text(CASE, turned(SUMMARY), turned(CERTIFICATES), turned(DIGESTS))
    assert again == text


def log_of(folder, name):
    for _ in range(3):
        subprocess.run(
            ["pdflatex", "-no-shell-escape", "-interaction=nonstopmode", "-halt-on-error", f"{name}.tex"],
            cwd=folder, check=True, capture_output=True, stdin=subprocess.DEVNULL,
        )  # fmt: skip
    return (folder / f"{name}.log").read_text(encoding="latin-1")


def faults(log):
    wide = [float(w) for w in re.findall(r"Overfull \\[hv]box \(([0-9.]+)pt", log)]
    return [w for w in wide if w > 5] + re.findall(
        r".*(?:undefined|multiply defined|Missing character).*", log
    )


@requires_latex
def test_the_appendix_compiles_without_faults(tmp_path, text):
    (tmp_path / "appendix.tex").write_text(text, encoding="ascii")
    first = compile_pdf(tmp_path).read_bytes()
    assert first.startswith(b"%PDF")
    assert sorted(path.name for path in tmp_path.iterdir()) == ["appendix.pdf", "appendix.tex"]
    assert compile_pdf(tmp_path).read_bytes() == first
    assert faults(log_of(tmp_path, "appendix")) == []


@requires_latex
def test_long_things_break(tmp_path):
    dense = " + ".join(f"{10**20 + k}*x^{k}" for k in range(40, 0, -1))
    deep = "1/(" * 12 + "p" + " + 1)" * 12
    factors = "*".join(f"(p + {k}*agreement_sum)" for k in range(100_000, 100_007))
    case = a_case(
        title="A long title on circulant graphs and their relatives " * 4,
        about="Words without end. " * 100 + "a" * 60,
        claims=(
            Claim(
                "a-claim-with-quite-a-long-name-for-a-column-of-a-table", condition(LONG), (), None
            ),
            Claim("nested", condition(f"agreement_sum <= {deep}"), (condition(LONG),), None),
            Claim("product", condition(f"{factors} <= 1 and {factors} != 2"), (), None),
        ),
        tables=(
            Table("wide", tuple(condition(f"agreement_sum/{k}") for k in range(1, 9)), (), None),
        ),
    )
    left, right = "9" * 150 + "/" + "7" * 150, {"lower": "1" * 90, "upper": "1" * 89 + "2"}
    found = [
        {
            **one,
            "parameters": {"p": "5", "f": dense, "a_long_name": "123456789012345678901234567890"},
            "claims": {
                c.name: relation(left, right, holds=i == 0, ratio=left) for c in case.claims
            },
            "tables": {"wide": ["12345678901234567890/7"] * 8},
        }
        for i, one in enumerate(CERTIFICATES[:3])
    ]
    made = appendix_text(case, summary_of(case, found), found, DIGESTS)
    assert max(map(len, made.splitlines())) <= 200
    (tmp_path / "appendix.tex").write_text(made, encoding="ascii")
    assert faults(log_of(tmp_path, "appendix")) == []


@requires_latex
def test_the_fragment_compiles_in_a_host(tmp_path):
    made = appendix_text(CASE, SUMMARY, CERTIFICATES, DIGESTS, fragment=True)
    (tmp_path / "fragment.tex").write_text(made, encoding="ascii")
    packages = re.findall(r"^%   (\\usepackage.*\})", made, re.MULTILINE)
    host = [
        "\\documentclass{article}", *packages, "\\usepackage{lmodern}", "\\begin{document}",
        "\\section{A section}\\cite{a}\\begin{thebibliography}{1}\\bibitem{a} A.\\end{thebibliography}",
        "\\appendix", "\\input{fragment}", "\\end{document}",
    ]  # fmt: skip
    (tmp_path / "host.tex").write_text("\n".join(host), encoding="ascii")
    assert faults(log_of(tmp_path, "host")) == []


@requires_latex
@pytest.mark.skipif(shutil.which("chktex") is None and "CI" not in os.environ, reason="no chktex")
def test_chktex_finds_no_error(tmp_path, text):
    (tmp_path / "appendix.tex").write_text(text, encoding="ascii")
    # spacing after commands and around brackets, dashes in file names, full stops after letters
    quiet = [f"-n{number}" for number in (1, 2, 3, 8, 12, 13, 26, 36)]
    ended = subprocess.run(
        ["chktex", "-q", *quiet, "appendix.tex"], cwd=tmp_path, capture_output=True, text=True,
        check=False,
    )  # fmt: skip
    assert ended.stdout == ""


@requires_latex
@pytest.mark.parametrize(
    "body", ["\\input{/etc/passwd}", "\\undefinedcommand", "\\input{../secret}", "\\csname"]
)
def test_a_bad_source_is_an_error_of_the_tool(tmp_path, body):
    inner = tmp_path / "inner"
    inner.mkdir()
    (tmp_path / "secret.tex").write_text("secret", encoding="ascii")
    source = f"\\documentclass{{article}}\\begin{{document}}{body}\\end{{document}}\n"
    (inner / "appendix.tex").write_text(source, encoding="ascii")
    with pytest.raises(ToolError, match=r"pdflatex stopped on appendix\.tex"):
        compile_pdf(inner)
    assert sorted(path.name for path in inner.iterdir()) == ["appendix.tex"]


@requires_latex
def test_no_command_is_run(tmp_path):
    marker = tmp_path / "made"
    source = (
        "\\documentclass{article}\\begin{document}a"
        f"\\immediate\\write18{{touch {marker}}}\\end{{document}}\n"
    )
    (tmp_path / "appendix.tex").write_text(source, encoding="ascii")
    compile_pdf(tmp_path)
    assert not marker.exists()


def test_a_missing_engine_names_what_to_install(tmp_path, monkeypatch):
    monkeypatch.setattr(shutil, "which", lambda _: None)
    with pytest.raises(ToolError, match="apt-get install"):
        compile_pdf(tmp_path)
