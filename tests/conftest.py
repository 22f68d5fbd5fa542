"""Shared fixtures; hypothesis is derandomised so that a run is reproducible."""

from pathlib import Path

import pytest
from hypothesis import settings

settings.register_profile("steady", derandomize=True, deadline=None, print_blob=True)
settings.load_profile("steady")

ROOT = Path(__file__).resolve().parents[1]


def pytest_addoption(parser):
    parser.addoption("--write-golden", action="store_true", help="rewrite the frozen summaries")


@pytest.fixture(scope="session")
def cases():
    return ROOT / "cases"


@pytest.fixture(scope="session")
def results(tmp_path_factory):
    """Results folders of every demo, made once."""
    from verifier.progress import silent
    from verifier.run import check_case, read_all

    folder = tmp_path_factory.mktemp("results")
    for case in read_all(sorted((ROOT / "cases").glob("*.toml"))):
        check_case(case, folder / case.name, 1, silent)
    return folder
