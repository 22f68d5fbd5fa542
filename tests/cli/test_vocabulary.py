"""`primewise vocabulary` lists every registered name with its definition and source."""

import re

import pytest
from click.testing import CliRunner

from verifier import catalogue
from verifier.cli import main
from verifier.registry import GRAPHS, PREDICATES, QUANTITIES, RULES

catalogue.load()
KINDS = {"rules": RULES, "graphs": GRAPHS, "quantities": QUANTITIES, "predicates": PREDICATES}


def test_everything_is_listed_with_its_definition():
    run = CliRunner().invoke(main, ["vocabulary"])
    assert run.exit_code == 0
    lines = run.stdout.splitlines()
    for kind, registry in KINDS.items():
        start = lines.index(f"{kind}:")
        for name, entry in registry.entries.items():
            head = re.compile(rf"  {re.escape(name)}(?![\w-])")
            place = next(i for i in range(start, len(lines)) if head.match(lines[i]))
            assert lines[place + 1].strip() == entry.definition
            assert lines[place + 2].strip() == f"source: {entry.source}"


@pytest.mark.parametrize("kind", sorted(KINDS))
def test_one_kind_alone(kind):
    run = CliRunner().invoke(main, ["vocabulary", kind])
    heads = [line for line in run.stdout.splitlines() if not line.startswith(" ")]
    assert heads == [f"{kind}:", "sources:"]


def test_measure_shows_witnesses_and_what_has_no_value():
    arguments = ["measure", "legendre", "p=7", "polynomial=x", "kind=circulant"]
    run = CliRunner().invoke(
        main, [*arguments, "--quantity", "edges", "--quantity", "correlation(2)"]
    )
    # chi modulo 7 with +1 at 0 is + + + - + - -, so the row is not symmetric: chi(-1) = -1
    assert run.stdout == (
        "symmetric = false  attained at (0, 1)\n"
        "edges has no value here\n"
        "correlation(2) = 3  attained at (2, 3, 3)\n"
    )


def test_an_appendix_does_not_seal_what_was_changed(results, tmp_path):
    """Digests are checked before the appendix is written anew, and no other line is touched."""
    import shutil

    folder = tmp_path / "paley"
    shutil.copytree(results / "paley", folder)
    before = (folder / "digests.txt").read_text()
    assert CliRunner().invoke(main, ["appendix", str(folder)]).exit_code == 0
    assert (folder / "digests.txt").read_text() == before
    table = folder / "tables" / "parameters.csv"
    table.write_text(table.read_text().replace("5,2,0,1", "5,2,1,1"))
    run = CliRunner().invoke(main, ["appendix", str(folder)])
    assert (run.exit_code, "parameters.csv" in run.stderr) == (2, True)
    assert (folder / "digests.txt").read_text() == before
