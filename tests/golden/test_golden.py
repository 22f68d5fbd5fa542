"""The summaries of the demonstrations, frozen: a freeze and no evidence; `poe golden` rewrites."""

from pathlib import Path

import pytest

FROZEN = Path(__file__).parent
DEMOS = sorted(path.stem for path in (FROZEN.parents[1] / "cases").glob("*.toml"))


@pytest.mark.parametrize("name", DEMOS)
def test_the_summary_is_as_frozen(name, results, request):
    found = (results / name / "summary.json").read_text()
    frozen = FROZEN / f"{name}.json"
    if request.config.getoption("--write-golden"):
        frozen.write_text(found)
    assert found == frozen.read_text()
