"""The re-checker stands alone: the standard library, any folder, one line for whatever is wrong."""

import ast
import json
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

import verifier.recheck.check as module
from verifier.progress import silent
from verifier.recheck.check import main
from verifier.run import check_case, read_all

SOURCE = Path(module.__file__).parent
FILES = sorted(SOURCE.glob("*.py"))
CASE = """format = 1
title = "One"
[parameters]
p = { values = [13] }
[sequence]
rule = "legendre"
polynomial = "x"
[graph]
kind = "circulant"
[[claim]]
name = "a"
says = "agreement_sum = p*(3*p - 2)/2"
"""


@pytest.fixture(scope="module")
def honest(tmp_path_factory):
    folder = tmp_path_factory.mktemp("alone")
    (folder / "one.toml").write_text(CASE)
    [case] = read_all([folder / "one.toml"])
    check_case(case, folder / "results", 1, silent)
    return folder / "results"


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.name)
def test_only_the_standard_library_and_neighbours(path):
    tree = ast.parse(path.read_text())
    assert len(path.read_text().splitlines()) < 300
    for node in ast.walk(tree):
        assert not isinstance(node, ast.Assert)
        assert not (isinstance(node, ast.Constant) and isinstance(node.value, float))
        if isinstance(node, ast.Import):
            assert all(name.name.split(".")[0] in sys.stdlib_module_names for name in node.names)
        if isinstance(node, ast.ImportFrom):
            near = node.level == 1 and (SOURCE / f"{node.module}.py").exists()
            near = near or (node.level == 1 and node.module is None)
            assert near or node.module.split(".")[0] in sys.stdlib_module_names
        if isinstance(node, ast.Name):
            assert node.id not in ("eval", "exec", "float", "compile")


def run(folder, *more):
    return subprocess.run(
        [sys.executable, "-E", "-S", "-m", "recheck", ".", *more],
        cwd=folder,
        capture_output=True,
        text=True,
        check=False,
        timeout=60,
    )


def test_runs_from_a_copy_and_leaves_a_folder_that_still_checks(honest, tmp_path):
    folder = tmp_path / "elsewhere"
    shutil.copytree(honest, folder)
    for _ in range(2):
        done = run(folder)
        assert (done.returncode, done.stderr) == (0, "")
        assert done.stdout == "re-checked: 1 instances, 1 claims, verdict holds\n"
    (folder / "json.py").write_text("raise SystemExit(0)")  # a stranger that would be imported
    assert run(folder).returncode == 5


@pytest.mark.parametrize("budget", ["0", "5", "50", "500", "1000000"])
def test_what_exceeds_the_budget_is_listed(honest, budget):
    done = run(honest, "--budget", budget)
    assert done.returncode == (0 if budget == "1000000" else 3)
    assert ("not re-checked" in done.stdout) == (done.returncode == 3)


@pytest.mark.parametrize(
    ("arguments", "status"),
    [([], 2), (["a", "b"], 2), (["--budget", "x", "a"], 2), (["--help"], 0), (["/nowhere"], 5)],
)
def test_calls(arguments, status, capsys):
    assert main(arguments) == status
    assert "Traceback" not in capsys.readouterr().err


HOSTILE = [  # (file, bytes, words of the one line)
    ("case.toml", b"\xff", "codec"),
    ("case.toml", b"a = " + b"[" * 100_000, "RecursionError"),
    (
        "case.toml",
        CASE.replace('"legendre"', '"jacobi"').encode(),
        "does not know the rule 'jacobi'",
    ),
    (
        "case.toml",
        (CASE + '[[least]]\nname = "x"\n').encode(),
        "does not know the case key 'least'",
    ),
    ("case.toml", CASE.replace("circulant", "toeplitz").encode(), "does not know the graph kind"),
    ("case.toml", CASE.replace("agreement_sum", "peak_sidelobe").encode(), "does not know 'peak"),
    ("case.toml", CASE.replace("agreement_sum", "9^9^9^9").encode(), "10^6 bits"),
    ("case.toml", CASE.replace("agreement_sum", "(" * 150 + "p" + ")" * 150).encode(), "recheck: "),
    ("case.toml", CASE.replace("agreement_sum", "p" + "+p" * 150).encode(), "too large"),
    ("case.toml", CASE.replace("agreement_sum", "__import__('os')").encode(), "cannot be read"),
    ("case.toml", CASE.replace("p*(3", "p.real*(3").encode(), "cannot be read"),
    (
        "case.toml",
        CASE.replace("{ values = [13] }", "{ values = [15] }").encode(),
        "15 is not prime",
    ),
    ("summary.json", b"[" * 10**6, "not canonical JSON"),
    ("summary.json", b'{"a":' + b"9" * 500_000 + b"}\n", "not canonical JSON"),
    ("summary.json", b'{"a":1e5}\n', "not canonical JSON: 1e5 is no integer"),
    ("summary.json", b'{"a":Infinity}\n', "Infinity is no integer"),
    ("summary.json", b'{"a":1,"a":1}\n', "a repeated key"),
    ("summary.json", b"{}\n", "summary.json"),
    ("certificates.jsonl", b"{}\n", "certificates.jsonl:1"),
]


@pytest.mark.parametrize(("name", "content", "words"), HOSTILE)
def test_hostile_files_end_in_one_line(honest, tmp_path, capsys, name, content, words):
    folder = tmp_path / "hostile"
    shutil.copytree(honest, folder)
    (folder / name).write_bytes(content)
    seal(folder)
    assert main([str(folder)]) == 5
    said = capsys.readouterr().err
    assert said.count("\n") == 1
    assert words in said, said


def seal(folder):
    files = {str(p.relative_to(folder)): p for p in folder.rglob("*") if p.is_file()}
    files = {name: p for name, p in files.items() if "__pycache__" not in name}
    files.pop("digests.txt")
    digest = module.sha256
    lines = [f"{digest(files[n].read_bytes()).hexdigest()}  {n}\n" for n in sorted(files)]
    (folder / "digests.txt").write_text("".join(lines))


def test_a_huge_file_and_a_link_are_refused(honest, tmp_path, capsys):
    folder = tmp_path / "huge"
    shutil.copytree(honest, folder)
    with (folder / "appendix.tex").open("ab") as file:
        file.truncate(2**28 + 1)
    assert main([str(folder)]) == 5
    assert "larger than 256 MB" in capsys.readouterr().err
    (folder / "appendix.tex").unlink()
    (folder / "appendix.tex").symlink_to(honest / "appendix.tex")
    assert main([str(folder)]) == 5
    assert "neither a file nor a folder" in capsys.readouterr().err


def test_the_first_difference_is_named_by_its_path(honest, tmp_path, capsys):
    folder = tmp_path / "forged"
    shutil.copytree(honest, folder)
    line = json.loads((folder / "certificates.jsonl").read_text())
    line["claims"]["a"]["left"] = "482"
    (folder / "certificates.jsonl").write_text(module.canonical_json(line) + "\n")
    seal(folder)
    assert main([str(folder)]) == 5
    message = 'recheck: certificates.jsonl:1: claims.a.left says "482" where "481/2" is right\n'
    assert capsys.readouterr().err == message
