"""Whole cases against their own main kernel, as ratios in one run; nothing asserts seconds."""

import resource
import statistics
import subprocess
import sys
import time

import pytest

from verifier.kernels.autocorrelation import periodic_autocorrelation
from verifier.kernels.quadratic_character import character_values
from verifier.progress import silent
from verifier.run import check_case, read_all

pytestmark = pytest.mark.bench

CASE = """format = 1
title = "Speed"
[parameters]
p = {{ {values} }}
[sequence]
rule = "legendre"
polynomial = "x"
[graph]
kind = "circulant"
[[claim]]
name = "agreement"
says = "agreement_sum = p*(3*p - 2)/2"
[[claim]]
name = "codegree"
says = "codegree_sum = p*(4*p - 5)/4"
[[claim]]
name = "shifts"
says = "shifted_sum(2) <= 2*sqrt(p) + 1"
"""


def seconds(work, times=3):
    taken = []
    for _ in range(times):
        start = time.perf_counter()
        work()
        taken.append(time.perf_counter() - start)
    return statistics.median(taken)


def case_of(folder, values):
    folder.mkdir(exist_ok=True)
    (folder / "speed.toml").write_text(CASE.format(values=values))
    return read_all([folder / "speed.toml"])[0]


def test_many_small_instances(tmp_path):
    many = case_of(tmp_path / "many", "primes = [5, 2000], class = [1, 4]")
    one = case_of(tmp_path / "one", "values = [5]")
    check_case(one, tmp_path / "warm", 1, silent)
    for jobs in (1, 2):
        whole = seconds(lambda n=jobs: check_case(many, tmp_path / "out", n, silent))
        start = seconds(lambda: check_case(one, tmp_path / "out", 1, silent))
        rate = 147 / (whole - start)
        print(f"\nPaley, 147 instances, {jobs} jobs: {rate:.0f} instances a second after start-up")


def test_one_large_instance(tmp_path):
    large = case_of(tmp_path / "large", "values = [1000033]")
    values = character_values(1000033, (1, 0))
    kernel = seconds(lambda: periodic_autocorrelation(values))
    whole = seconds(lambda: check_case(large, tmp_path / "out", 1, silent))
    memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss // 1024
    print(f"\np = 1,000,033: {whole / kernel:.2f} autocorrelations; peak {memory} MB")


def test_help_starts_quickly():
    bare = seconds(lambda: subprocess.run([sys.executable, "-c", "pass"], check=True))
    helped = seconds(
        lambda: subprocess.run(
            [sys.executable, "-m", "verifier", "--help"], check=True, stdout=subprocess.DEVNULL
        )
    )
    print(f"\n--help: {helped:.3f} s, {helped / bare:.1f} bare interpreters")
