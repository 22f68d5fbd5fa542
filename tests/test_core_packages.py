"""One demonstration's check and appendix put python-flint, sympy, networkx and jinja2 to real work."""

import subprocess
import sys

import pytest

RUN = """
import sys
from pathlib import Path
blocked = {blocked!r}
if blocked:
    sys.modules[blocked] = None
called = set()
def watch(frame, event, function):
    module = function.__module__ if event == "c_call" else frame.f_globals.get("__name__")
    owner = getattr(function, "__self__", None)
    for name in (module, getattr(type(owner), "__module__", None)):
        called.add((name or "").partition(".")[0])
import verifier.exact.nodes as nodes  # calls into extension types are not all profiled
exact = nodes.fmpq
def counted(*args):
    called.add("flint")
    return exact(*args)
nodes.fmpq = counted
from verifier.progress import silent
from verifier.run import check_case, read_all, write_appendix
sys.setprofile(watch)
case = read_all([Path({case!r})])[0]
check_case(case, Path({out!r}), 1, silent)
list(write_appendix(Path({out!r}), fragment=True, pdf=False, all_rows=False))
sys.setprofile(None)
print(sorted(called & {{"flint", "sympy", "networkx", "jinja2"}}))
"""


def run(cases, tmp_path, blocked):
    code = RUN.format(
        blocked=blocked, case=str(cases / "surveyed-plan.toml"), out=str(tmp_path / "out")
    )
    return subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=False)


def test_all_four_are_called(cases, tmp_path):
    done = run(cases, tmp_path, "")
    assert done.stdout.strip() == "['flint', 'jinja2', 'networkx', 'sympy']", done.stderr


@pytest.mark.parametrize("package", ["flint", "sympy", "networkx", "jinja2"])
def test_none_can_be_missing(cases, tmp_path, package):
    done = run(cases, tmp_path, package)
    assert done.returncode != 0
    assert f"import of {package} halted" in done.stderr
