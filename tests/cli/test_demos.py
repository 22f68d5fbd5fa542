"""Every demonstration: its exit status, and byte-identical results however it is run."""

import hashlib

import pytest
from click.testing import CliRunner

from verifier.cli import main

STATUS = {"paley": 0, "quartic-plan": 0, "sharp-constant": 4, "surveyed-plan": 0}


def digests(folder):
    return {
        str(path.relative_to(folder)): hashlib.sha256(path.read_bytes()).hexdigest()
        for path in sorted(folder.rglob("*"))
        if path.is_file()
    }


def test_every_demo_is_listed(cases):
    assert sorted(path.stem for path in cases.glob("*.toml")) == sorted(STATUS)


@pytest.mark.parametrize("name", sorted(STATUS))
def test_status_and_identical_folders(name, cases, tmp_path, results):
    for jobs in ("1", "2"):
        out = tmp_path / jobs
        arguments = ["check", str(cases / f"{name}.toml"), "--out", str(out), "--jobs", jobs]
        run = CliRunner().invoke(main, arguments)
        assert run.exit_code == STATUS[name], run.output
        assert digests(out) == digests(results / name)


def test_workers_give_the_same_bytes(cases, tmp_path, results, monkeypatch):
    """Small cases run in one process whatever --jobs says, so the workers are forced here."""
    import verifier.pool

    monkeypatch.setattr(verifier.pool, "WORTH_WORKERS", 0)
    out = tmp_path / "out"
    CliRunner().invoke(
        main, ["check", str(cases / "quartic-plan.toml"), "--out", str(out), "--jobs", "2"]
    )
    assert digests(out) == digests(results / "quartic-plan")


def test_an_older_folder_is_replaced_whole(cases, tmp_path):
    out = tmp_path / "out"
    for name in ("paley", "surveyed-plan"):
        CliRunner().invoke(main, ["check", str(cases / f"{name}.toml"), "--out", str(out)])
    assert not (out / "tables").exists()
    assert (out / "inputs" / "surveyed-plan.s6").exists()
    assert [path.name for path in tmp_path.iterdir()] == ["out"]


def test_json_is_one_line_a_case(cases, tmp_path, results):
    arguments = ["check", str(cases / "paley.toml"), str(cases / "sharp-constant.toml")]
    run = CliRunner().invoke(main, [*arguments, "--out", str(tmp_path / "o"), "--json"])
    assert run.exit_code == 4
    expected = [(results / n / "summary.json").read_text() for n in ("paley", "sharp-constant")]
    assert run.stdout == "".join(expected)
    assert run.stderr == ""


def test_digests_are_those_of_sha256sum(results, tmp_path):
    """The form is that of `sha256sum -c` (coreutils)."""
    import subprocess

    for folder in results.iterdir():
        done = subprocess.run(
            ["sha256sum", "-c", "--strict", "--quiet", "digests.txt"], cwd=folder, check=False
        )
        assert done.returncode == 0


def test_certificates_are_canonical_and_small(results):
    """RFC 8785, by the library of that name; at most 4 kB a line."""
    import json

    import rfc8785

    for path in results.rglob("*.json*"):
        for line in path.read_bytes().splitlines():
            assert rfc8785.dumps(json.loads(line)) == line
            assert path.name == "summary.json" or len(line) <= 4096


def test_measure_is_the_same_pipeline():
    run = CliRunner().invoke(
        main,
        [
            "measure",
            "legendre",
            "p=29",
            "polynomial=x",
            "kind=circulant",
            "--quantity",
            "agreement_sum",
        ],
    )
    # p(3p - 2)/2 for a Paley graph: strongly regular, Brouwer and Haemers, Spectra of Graphs
    assert (run.exit_code, run.stdout) == (0, "agreement_sum = 2465/2\n")


@pytest.mark.parametrize("command", ["check", "measure", "appendix", "recheck", "vocabulary"])
def test_every_help_has_an_example(command):
    run = CliRunner().invoke(main, [command, "--help"])
    assert run.exit_code == 0
    assert f"Example: primewise {command}" in run.stdout


def test_the_cautions_end_the_help_of_check():
    run = CliRunner().invoke(main, ["check", "--help"])
    assert (
        "Small correlation is no evidence of"
        in run.stdout.splitlines()[-2] + run.stdout.splitlines()[-1]
    )


def test_help_loads_nothing_heavy():
    import subprocess
    import sys

    code = (
        "import sys\nfrom verifier.cli import main\n"
        "try:\n    main(['--help'])\nexcept SystemExit:\n    pass\n"
        "heavy = {'numpy', 'numba', 'sympy', 'networkx', 'flint', 'jinja2', 'pydantic'} & set(sys.modules)\n"
        "print(sorted(heavy), file=sys.stderr)"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stderr.strip() == "[]"
