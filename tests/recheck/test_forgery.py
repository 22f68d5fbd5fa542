"""A results folder with any change of meaning is refused, digests made anew by the forger.

The list of forgeries is the project's own; common practice, no source.
"""

import contextlib
import copy
import hashlib
import io
import itertools
import json
import shutil

import pytest

from verifier.progress import silent
from verifier.recheck.check import main as recheck
from verifier.run import check_case, read_all

CASE = """format = 1
title = "Small"
[parameters]
p = { primes = [5, 17] }
f = { polynomials = ["x", "x^2 + 3"] }
[define]
B = "2*sqrt(p) + r + 2"
[sequence]
rule = "legendre"
polynomial = "f"
[graph]
kind = "circulant"
[measure]
quantities = ["well_distribution", "prime(p + 2)", "window_sum(0, p/2)"]
[[claim]]
name = "surd"
says = "agreement_sum <= n*(n + (n - 1)*B)/2"
given = ["squarefree(f)"]
[[claim]]
name = "logarithm"
says = "correlation(2) < 2*k*sqrt(p)*log(p)"
[[claim]]
name = "joined"
says = "regular and not 2*degree_max > n or codegree_max < 2"
[[claim]]
name = "fails"
says = "shifted_sum(2) = 1"
[[table]]
name = "small"
columns = ["p", "f", "balance", "round(balance/sqrt(p), 3)"]
"""
OTHERS = [  # consistent results of another case, with this case's text put in their place
    ('polynomial = "f"', 'polynomial = "f"\nat-zero = -1'),
    ('polynomial = "f"', 'polynomial = "f"\nindices = "1..p"'),
    ('polynomial = "f"', 'polynomial = "f"\nsymmetrise = "mirror"'),
    ('"x^2 + 3"', '"x^2 + 2"'),
    ("[5, 17]", "[5, 13]"),
    ("[5, 17]", "[5, 19]"),
    ("[5, 17]", "[5, 17], class = [1, 4]"),
    ("[5, 17]", "[7, 17]"),
    ("+ r + 2", "+ r + 3"),
    ("+ r + 2", "+ 2 + r"),
    ("(n - 1)*B", "n*B"),
    ("log(p)", "log(2*p)"),
    ("correlation(2) <", "correlation(2) <="),
    ("correlation(2) <", "correlation(3) <"),
    ('given = ["squarefree(f)"]', 'given = ["even(f)"]'),
    ('given = ["squarefree(f)"]', ""),
    ("regular and not", "regular or not"),
    ("shifted_sum(2) = 1", "shifted_sum(2) >= 1"),
    ("well_distribution", "out_of_phase"),
    ("balance/sqrt(p), 3", "balance/sqrt(p), 2"),
    ('name = "fails"', 'name = "holds"'),
    ('kind = "circulant"', 'kind = "cayley-sum"'),
]


def make(folder, text):
    folder.mkdir()
    (folder / "small.toml").write_text(text)
    [case] = read_all([folder / "small.toml"])
    check_case(case, folder / "results", 1, silent)
    return folder / "results"


@pytest.fixture(scope="module")
def honest(tmp_path_factory):
    return make(tmp_path_factory.mktemp("honest") / "small", CASE)


def seal(folder):
    """Make the digests anew, as a forger would."""
    files = sorted(str(p.relative_to(folder)) for p in folder.rglob("*") if p.is_file())
    lines = [
        f"{hashlib.sha256((folder / name).read_bytes()).hexdigest()}  {name}\n"
        for name in files
        if name != "digests.txt"
    ]
    (folder / "digests.txt").write_text("".join(lines))


def verdict(folder):
    out, err = io.StringIO(), io.StringIO()
    with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
        status = recheck([str(folder)])
    return status, out.getvalue() + err.getvalue()


def refused(honest, tmp_path, name, data):
    """Return the message about the honest folder with one file exchanged."""
    forged = tmp_path / "forged"
    shutil.rmtree(forged, ignore_errors=True)
    shutil.copytree(honest, forged)
    (forged / name).write_bytes(data if isinstance(data, bytes) else data.encode())
    seal(forged)
    status, message = verdict(forged)
    assert status == 5, (name, data[-300:], message)
    assert message.strip()
    return message


def canonical(document):
    return json.dumps(document, sort_keys=True, separators=(",", ":"))


def changed(leaf):
    """Return what a forger might write instead of a leaf."""
    if isinstance(leaf, bool):
        return [not leaf, None]
    if isinstance(leaf, int):
        return [leaf + 1, str(leaf)]
    if leaf is None:
        return ["1", False]
    found = [leaf + "0", "1" + leaf]
    if leaf in ("holds", "fails", "outside", "open"):
        found += [word for word in ("holds", "fails", "outside", "open") if word != leaf]
    if leaf.isdigit():
        found.append(str(int(leaf) + 1))
    return found


def mutations(document):
    """Yield the document with each leaf changed, and with each key or entry dropped."""
    paths = []

    def walk(node, path):
        paths.append((path, node))
        children = (
            node.items()
            if isinstance(node, dict)
            else enumerate(node)
            if isinstance(node, list)
            else ()
        )
        for key, child in children:
            walk(child, [*path, key])

    walk(document, [])
    for path, node in paths:
        if not path:
            continue
        options = [] if isinstance(node, dict | list) else changed(node)
        for option in [*options, "drop"]:
            forged = copy.deepcopy(document)
            target = forged
            for step in path[:-1]:
                target = target[step]
            if option == "drop":
                del target[path[-1]]
            else:
                target[path[-1]] = option
            yield path, forged


def test_the_honest_folder_is_accepted(honest):
    status, message = verdict(honest)
    assert status == 0, message
    assert "10 instances" in message


def test_every_leaf_of_a_certificate_is_guarded(honest, tmp_path):
    lines = (honest / "certificates.jsonl").read_text().splitlines()
    count = 0
    for number in (0, 3):
        for path, forged in mutations(json.loads(lines[number])):
            text = "\n".join([*lines[:number], canonical(forged), *lines[number + 1 :]]) + "\n"
            message = refused(honest, tmp_path, "certificates.jsonl", text)
            assert f"certificates.jsonl:{number + 1}" in message, (path, message)
            count += 1
    assert count > 300


def test_every_leaf_of_the_summary_is_guarded(honest, tmp_path):
    summary = json.loads((honest / "summary.json").read_text())
    summary["instances"] = summary["instances"][:1]
    full = json.loads((honest / "summary.json").read_text())
    count = 0
    for path, forged in itertools.islice(mutations(summary), 0, None, 2):  # every other one
        made = forged
        if path[0] == "instances" and len(path) > 1:
            made = {**full, "instances": [*forged["instances"], *full["instances"][1:]]}
        elif path[0] != "instances":
            made = {**forged, "instances": full["instances"]}
        message = refused(honest, tmp_path, "summary.json", canonical(made) + "\n")
        assert "summary.json" in message, (path, message)
        count += 1
    assert count > 100


def test_lines_dropped_exchanged_and_repeated(honest, tmp_path):
    lines = (honest / "certificates.jsonl").read_text().splitlines()
    swapped = [lines[1], lines[0], *lines[2:]]
    for forged in (lines[:-1], lines[1:], [*lines, lines[-1]], swapped, [*lines, ""], []):
        message = refused(honest, tmp_path, "certificates.jsonl", "".join(f"{x}\n" for x in forged))
        assert "certificates.jsonl" in message


def test_text_that_is_not_canonical(honest, tmp_path):
    lines = (honest / "certificates.jsonl").read_text().splitlines()
    first = json.loads(lines[0])
    reversed_keys = json.dumps(dict(sorted(first.items(), reverse=True)), separators=(",", ":"))
    forgeries = [
        json.dumps(first, sort_keys=True),
        reversed_keys,
        lines[0].replace('"index":0', '"index":0.0'),
        lines[0].replace('"index":0', '"index":NaN'),
        lines[0].replace('"index":0', '"index":-0'),
        lines[0].replace('"index":0', '"index":0,"index":0'),
        lines[0].replace('"index":0', '"index":' + "[" * 100_000 + "]" * 100_000),
        lines[0].replace('"index":0', '"index":' + "9" * 5000),
        lines[0][:-1],
        "null",
        "[]",
        '"text"',
        " " + lines[0],
        lines[0] + "\r",
        "\ufeff" + lines[0],
    ]
    for forged in forgeries:
        text = "".join(f"{x}\n" for x in [forged, *lines[1:]])
        assert "certificates.jsonl" in refused(honest, tmp_path, "certificates.jsonl", text)
    assert refused(honest, tmp_path, "certificates.jsonl", b"\xff\xfe\n")
    whole = (honest / "certificates.jsonl").read_bytes()
    assert refused(honest, tmp_path, "certificates.jsonl", whole[:-1])


@pytest.mark.parametrize(("old", "new"), OTHERS)
def test_a_consistent_certificate_of_another_case(honest, tmp_path, old, new):
    """The forger runs another case honestly and puts this case's text beside its results."""
    assert old in CASE
    forged = make(tmp_path / "small", CASE.replace(old, new))
    assert verdict(forged)[0] == 0, verdict(forged)[1]
    shutil.copy(honest / "case.toml", forged / "case.toml")
    seal(forged)
    status, message = verdict(forged)
    assert status == 5, message


@pytest.mark.parametrize(("old", "new"), OTHERS)
def test_a_case_that_was_changed_afterwards(honest, tmp_path, old, new):
    refused(honest, tmp_path, "case.toml", CASE.replace(old, new))


def test_tables_are_guarded(honest, tmp_path):
    text = (honest / "tables" / "small.csv").read_text()
    for forged in (
        text.replace("5,x,1", "5,x,2"),
        text + "1\n",
        text[:-1],
        text.replace("p,f", "p,g"),
        "",
    ):
        assert forged != text
        assert "small.csv" in refused(honest, tmp_path, "tables/small.csv", forged)


def test_digests_are_checked(honest, tmp_path):
    forged = tmp_path / "forged"
    shutil.copytree(honest, forged)
    (forged / "appendix.tex").write_text("another appendix")
    status, message = verdict(forged)
    assert (status, "appendix.tex" in message) == (5, True)


@pytest.mark.parametrize(
    "stranger", ["more.txt", "recheck/extra.py", "tables/other.csv", ".hidden"]
)
def test_strangers_are_refused(honest, tmp_path, stranger):
    forged = tmp_path / "forged"
    shutil.copytree(honest, forged)
    (forged / stranger).write_text("x")
    assert verdict(forged)[0] == 5
    seal(forged)
    if stranger != "recheck/extra.py":
        assert verdict(forged)[0] == 5


def test_what_is_made_later_is_ignored(honest, tmp_path):
    folder = tmp_path / "later"
    shutil.copytree(honest, folder)
    for name in ("appendix.pdf", "fragment.tex"):
        (folder / name).write_text("x")
    assert verdict(folder)[0] == 0


def test_a_small_budget_is_never_silent(honest):
    out = io.StringIO()
    with contextlib.redirect_stdout(out), contextlib.redirect_stderr(out):
        status = recheck([str(honest), "--budget", "2000"])
    assert (status, "not re-checked" in out.getvalue()) == (3, True)
