"""Every kind of bad input: one clear message with its place, exit status 2, nothing written.

The list is the project's own; common practice, no source.
"""

import os
import re
import subprocess
import sys

import pytest
from click.testing import CliRunner

from verifier.cli import main

GOOD = """format = 1
title = "A case"
[parameters]
p = { primes = [5, 13] }
[sequence]
rule = "legendre"
polynomial = "x"
[graph]
kind = "circulant"
[[claim]]
name = "one"
says = "agreement_sum <= n^3"
"""


def refused(tmp_path, text, *options):
    case = tmp_path / "bad.toml"
    case.write_bytes(text if isinstance(text, bytes) else text.encode())
    out = tmp_path / "out"
    result = CliRunner().invoke(main, ["check", str(case), "--out", str(out), *options])
    assert result.exit_code == 2, (result.exit_code, result.output, result.exception)
    assert "Traceback" not in result.output
    assert not out.exists()
    assert [entry.name for entry in tmp_path.iterdir()] == ["bad.toml"]
    return result.stderr


def says(text):
    return GOOD.replace("agreement_sum <= n^3", text)


def test_the_good_case_is_good(tmp_path):
    (tmp_path / "good.toml").write_text(GOOD)
    result = CliRunner().invoke(
        main, ["check", str(tmp_path / "good.toml"), "--out", str(tmp_path / "o")]
    )
    assert result.exit_code == 4 or result.exit_code == 0, result.output


REPLACED = [  # what is replaced, by what, the line of the message, a word that it must hold
    ('title = "A case"', 'titel = "A case"', 2, "nearest is title"),
    ("format = 1", "format = 2", 1, "1 was wanted"),
    ('rule = "legendre"', 'rule = "legendree"', 6, "nearest is legendre"),
    ('kind = "circulant"', 'kind = "circulent"', 9, "nearest is circulant"),
    ("agreement_sum <=", "agreement_sun <=", 12, "nearest is agreement_sum"),
    ("<= n^3", "<= m^3", 12, "unknown"),
    ("{ primes = [5, 13] }", "{ primes = [24, 28] }", 4, "no prime"),
    ("{ primes = [5, 13] }", "{ primes = [5, 13], class = [0, 4] }", 4, "no prime"),
    ("{ primes = [5, 13] }", "{ primes = [13, 5] }", 4, "no prime"),
    ("{ primes = [5, 13] }", "{ values = [15] }", 4, "a prime was wanted"),
    ("{ primes = [5, 13] }", "{ values = [5.0] }", 4, "integer"),
    ("{ primes = [5, 13] }", "{ primes = [5, inf] }", 4, "unbounded"),
    ("{ primes = [5, 13] }", "{ primos = [5, 13] }", 4, "primes"),
    ("{ primes = [5, 13] }", "{ primes = [5, 13], klass = [1, 4] }", 4, "nearest is class"),
    ('polynomial = "x"', 'polynomial = "y"', 7, "unknown"),
    ('polynomial = "x"', 'polynomial = "x^1001"', 7, "1000"),
    ('polynomial = "x"', 'polynomial = "x/0"', 7, "zero"),
    ('polynomial = "x"', 'polynomial = "1/x"', 7, ""),
    ('polynomial = "x"', "polynomial = 3", 7, "text"),
    ('polynomial = "x"', 'polynomial = "x"\nat-zero = 0', 8, "1 or -1"),
    ('polynomial = "x"', 'polynomial = "x"\nat_zero = 1', 8, "nearest is at-zero"),
    ('polynomial = "x"', 'polynomial = "x"\nindices = "0-4"', 8, "0..p-1"),
    ('polynomial = "x"', 'polynomial = "x"\nsymmetrise = "yes"', 8, "mirror"),
    ("agreement_sum <= n^3", "agreement_sum", 12, "relation"),
    ("agreement_sum <= n^3", "1 < agreement_sum < n", 12, "and"),
    ("agreement_sum <= n^3", "agreement_sum == n", 12, "="),
    ("agreement_sum <= n^3", "agreement_sum <= n**3", 12, "^"),
    ("agreement_sum <= n^3", "agreement_sum <= 2n", 12, "*"),
    ("agreement_sum <= n^3", "agreement_sum <= 1e3", 12, ""),
    ("agreement_sum <= n^3", "agreement_sum <= .5", 12, ""),
    ("agreement_sum <= n^3", "agreement_sum <= 9^9^9", 12, "64"),
    ("agreement_sum <= n^3", "agreement_sum <= 2^65", 12, "64"),
    ("agreement_sum <= n^3", "(" * 10_000 + "1" + ")" * 10_000 + " < n", 12, ""),
    ("agreement_sum <= n^3", "(" * 150 + "1" + ")" * 150 + " < n", 12, "depth"),
    ("agreement_sum <= n^3", "symmetric <= 1", 12, "predicate"),
    ("agreement_sum <= n^3", "sqrt(n, n) < 1", 12, "argument"),
    ("agreement_sum <= n^3", "correlation(9) < n", 12, "orders"),
    ("agreement_sum <= n^3", "correlation < n", 12, "argument"),
    ("agreement_sum <= n^3", "n < \\u03c0", 12, "ASCII"),
    ("agreement_sum <= n^3", "__import__('os') < 1", 12, ""),
    ("agreement_sum <= n^3", "p.real < 1", 12, ""),
    ('name = "one"', 'name = "../one"', 11, "name"),
    ('name = "one"', 'name = "one"\ngiven = ["p >"]', 12, ""),
    ('name = "one"', 'name = "one"\nsource = "nowhere"', 12, "source"),
    ("[graph]", '[notation]\nagreement_sum = "\\\\input{x}"\n[graph]', 9, "input"),
    ("[graph]", '[notation]\nagreement_sum = "x^^5cinput"\n[graph]', 9, "^^"),
    ("[graph]", '[notation]\nagreement_sum = "\\\\write18{ls}"\n[graph]', 9, "write"),
    ("[graph]", '[define]\nn = "3"\n[graph]', 9, "reserved"),
    ("[graph]", '[define]\nA = "B"\nB = "1"\n[graph]', 9, "unknown"),
    ('title = "A case"', 'title = "\\u4e2d"', 2, "U+4E2D"),
    ("format = 1", "format = 1\nformat = 1", None, "TOML"),
    (
        "[[claim]]",
        '[[table]]\nname = "t"\ncolumns = ["p"]\n[[table]]\nname = "t"\ncolumns = ["n"]\n[[claim]]',
        14,
        "above",
    ),
    ("[[claim]]", '[[claim]]\nname = "one"\nsays = "n > 0"\n[[claim]]', 14, "above"),
    (
        "[[claim]]",
        '[[table]]\nname = "t"\ncolumns = ["p"]\nexpect = "../t.csv"\n[[claim]]',
        13,
        "leaves the folder",
    ),
    (
        "[[claim]]",
        '[[table]]\nname = "t"\ncolumns = ["p"]\nexpect = "none.csv"\n[[claim]]',
        13,
        "no file",
    ),
    (
        "[[claim]]",
        '[[table]]\nname = "t"\ncolumns = ["p"]\nheads = ["a", "b"]\n[[claim]]',
        13,
        "1 were wanted",
    ),
    ("[[claim]]", '[measure]\nquantities = ["p"]\n[[claim]]', 11, "quantity"),
    ("[[claim]]", '[[least]]\nname = "l"\nsays = "1 <= c"\n[[claim]]', 10, "not supported"),
]


@pytest.mark.parametrize(("old", "new", "line", "word"), REPLACED)
def test_the_message_names_the_line(tmp_path, old, new, line, word):
    assert old in GOOD
    message = refused(tmp_path, GOOD.replace(old, new))
    if line is not None:
        assert f"bad.toml:{line}:" in message, message
    assert word in message, message
    assert len([x for x in message.splitlines() if not x.startswith("    ")]) <= 2, message


AT_AN_INSTANCE = [
    (says("agreement_sum <= n/(p - 5)"), "division by zero"),
    (says("agreement_sum <= log(p - 7)"), "log"),
    (says("agreement_sum <= sqrt(p - 7)"), "root of a negative"),
    (says("agreement_sum <= 1.5 mod 2"), "mod"),
    (GOOD.replace("primes = [5, 13]", "primes = [2, 13]"), "odd prime"),
    (GOOD.replace("primes = [5, 13]", "values = [2]"), "odd prime"),
    (GOOD.replace("primes = [5, 13]", "values = [5]").replace('"x"', '"5*x + 10"'), "vanishes"),
    (GOOD.replace("primes = [5, 13]", "values = [5]").replace('"x"', '"x/5"'), "denominator"),
    (GOOD.replace("primes = [5, 13] }", 'primes = [5, 13] }\nwhere = ["p > 100"]'), "where"),
]


@pytest.mark.parametrize(("text", "word"), AT_AN_INSTANCE)
def test_what_has_no_value_at_an_instance(tmp_path, text, word):
    assert word in refused(tmp_path, text)


def test_all_problems_are_reported_at_once(tmp_path):
    text = (
        GOOD.replace("legendre", "legendree")
        .replace("circulant", "circulent")
        .replace("<= n^3", "<= m")
    )
    message = refused(tmp_path, text)
    assert [int(line) for line in re.findall(r"bad\.toml:(\d+):", message)] == [6, 9, 12]


@pytest.mark.parametrize(
    ("data", "word"),
    [
        (b"\x7fELF\0\0", "NUL"),
        (b"\xff\xfe", "UTF-8"),
        (b"a = 1" + b" " * (1 << 20), "1 MiB"),
        (b"", "missing"),
        (b"= 3", "TOML"),
        (b"x = " + b"[" * 5000, "TOML"),
    ],
)
def test_files_that_are_no_case(tmp_path, data, word):
    assert word in refused(tmp_path, data)


def test_a_folder_is_no_case(tmp_path):
    result = CliRunner().invoke(main, ["check", str(tmp_path)])
    assert (result.exit_code, "folder" in result.stderr) == (2, True)


def test_a_missing_file_is_no_case(tmp_path):
    result = CliRunner().invoke(main, ["check", str(tmp_path / "none.toml")])
    assert (result.exit_code, "no such file" in result.stderr) == (2, True)


@pytest.mark.parametrize("kind", ["file", "foreign", "below-file"])
def test_targets_that_are_not_ours(tmp_path, kind):
    (tmp_path / "good.toml").write_text(GOOD)
    out = tmp_path / "out"
    if kind == "foreign":
        out.mkdir()
        (out / "thesis.txt").write_text("mine")
    else:
        out.write_text("mine")
    target = out / "deeper" if kind == "below-file" else out
    result = CliRunner().invoke(main, ["check", str(tmp_path / "good.toml"), "--out", str(target)])
    assert result.exit_code == 2, result.output
    assert "Traceback" not in result.output
    kept = out / "thesis.txt" if kind == "foreign" else out
    assert kept.read_text() == "mine"


def test_a_refused_case_leaves_no_folder_behind(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    (tmp_path / "bad.toml").write_text(says("agreement_sum <= n/(p - 5)"))
    assert CliRunner().invoke(main, ["check", "bad.toml"]).exit_code == 2
    assert [entry.name for entry in tmp_path.iterdir()] == ["bad.toml"]


def test_a_full_disk_leaves_nothing_half_written(tmp_path, monkeypatch):
    """A disk that fills up is played by a write that raises ENOSPC at the third file."""
    import verifier.results as results

    written = []
    original = results._write

    def full(path, data):
        written.append(path)
        if len(written) == 3:
            raise OSError(28, "No space left on device")
        original(path, data)

    monkeypatch.setattr(results, "_write", full)
    (tmp_path / "good.toml").write_text(GOOD)
    out = tmp_path / "out"
    result = CliRunner().invoke(main, ["check", str(tmp_path / "good.toml"), "--out", str(out)])
    assert (result.exit_code, "no space left" in result.stderr) == (2, True)
    assert [entry.name for entry in tmp_path.iterdir()] == ["good.toml"]


def test_output_that_is_cut_off_is_no_error(tmp_path, cases):
    """The reader of the pipe has gone before the first line."""
    reading, writing = os.pipe()
    os.close(reading)
    command = [sys.executable, "-m", "verifier", "vocabulary"]
    done = subprocess.run(command, stdout=writing, stderr=subprocess.PIPE, check=False)
    os.close(writing)
    assert (done.returncode, done.stderr) == (0, b"")


@pytest.mark.parametrize("name", ["summary.json", "certificates.jsonl", "case.toml"])
@pytest.mark.parametrize(
    "text", ["[]", "{}", '{"case":1}', '{"claims":{}}', "null", '"x"', "\xff", ""]
)
def test_an_appendix_of_a_spoilt_folder_is_refused(tmp_path, name, text):
    (tmp_path / "good.toml").write_text(GOOD)
    out = tmp_path / "out"
    CliRunner().invoke(main, ["check", str(tmp_path / "good.toml"), "--out", str(out)])
    (out / name).write_text(text)
    result = CliRunner().invoke(main, ["appendix", str(out)])
    assert result.exit_code == 2, (result.output, result.exception)
    assert len(result.stderr.splitlines()) <= 4


@pytest.mark.parametrize(
    ("arguments", "word"),
    [
        (["legendre", "p=9", "polynomial=x", "--quantity", "balance"], "a prime was wanted"),
        (["legendre", "p=29", "--quantity", "balance"], "polynomial is missing"),
        (["legendre", "p=29", "polynomial=x", "k", "--quantity", "balance"], "NAME=VALUE"),
        (["legendre", "p=29", "polynomial=x", "p=31", "--quantity", "balance"], "twice"),
        (["legendro", "p=29", "--quantity", "balance"], "nearest is legendre"),
        (["legendre", "p=29", "polynomial=x", "--quantity", "balanse"], "nearest is balance"),
        (
            ["legendre", "p=29", "polynomial=x", "--quantity", "balance + 1"],
            "quantity or predicate",
        ),
        (["legendre", "p=29", "polynomial=x", "--quantity", "edges"], "a graph"),
        (["legendre", "p=29", "polynomial=29*x", "--quantity", "balance"], "vanishes"),
    ],
)
def test_measure_refuses_what_has_no_meaning(arguments, word):
    result = CliRunner().invoke(main, ["measure", *arguments])
    assert (result.exit_code, word in result.stderr) == (2, True), result.output
    assert "command line:" not in result.stderr
