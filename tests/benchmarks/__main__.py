"""Run the benchmarks and print their tables: ``python -m tests.benchmarks``."""

from __future__ import annotations

import statistics
import subprocess
import sys
import time

import numpy as np

from engine import BarGroups, flexural_state
from optimizer import parse_job
from optimizer.options import options
from optimizer.palette import choose_palette
from optimizer.results import rank_section
from tests.benchmarks.alternatives import Outcome, enumerate_everything, evolve
from tests.benchmarks.beams import beam_benchmarks
from tests.benchmarks.sections import Case, benchmark_set

_RUNS = 5
_STRENGTHS = 1_000_000
_WIDEST_COMPARED = 16.0  # [in] of three layers: those of wider webs take minutes to enumerate
_SECTION = """
[[section]]
mark = "S{number}"
width = "{width} in"
depth = "{depth} in"
Mu = "{Mu} kip*ft"
cover = "1.5 in"
stirrup = "#4"
layers = ["4 #8", "2 #8"]
"""
_JOB = """
code = "ACI 318-19"
[materials]
fc = "4000 psi"
steel = "A615-60"
aggregate = "3/4 in"
[bars]
catalog = "astm-inch"
sizes = ["#6", "#7", "#8", "#9", "#10", "#11"]
max_layers = 2
{sections}
[options]
{levers}
"""


def demo_seconds() -> list[float]:
    """Cold processes of ``cagewright demo``."""
    times = []
    for _ in range(_RUNS):
        start = time.perf_counter()
        subprocess.run([sys.executable, "-m", "optimizer", "demo"], check=True, capture_output=True)
        times.append(time.perf_counter() - start)
    return times


def section_seconds(cases: list[Case]) -> list[float]:
    """Best of three warm runs of every section, ten candidates with proof."""
    for case in cases[:2]:
        rank_section(case.problem)
    times = []
    for case in cases:
        runs = []
        for _ in range(3):
            start = time.perf_counter()
            result = rank_section(case.problem)
            runs.append(time.perf_counter() - start)
            assert result.proved
        times.append(min(runs))
    return times


def options_seconds(levers: str) -> float:
    """Trade-off set of one section with a drawn layout."""
    section = _SECTION.format(number=1, width=14, depth=24, Mu=250)
    job = parse_job(_JOB.format(sections=section, levers=levers))
    start = time.perf_counter()
    result = options(job)
    assert all(item.proved for item in result.sections)
    return time.perf_counter() - start


def palette_seconds(count: int) -> float:
    """Sizes for a whole job of different sections."""
    sections = [
        _SECTION.format(number=n, width=12 + n % 4, depth=22 + n % 5, Mu=150 + 4 * n)
        for n in range(count)
    ]
    job = parse_job(_JOB.format(sections="".join(sections), levers=""))
    start = time.perf_counter()
    assert choose_palette(job.problems, 4).proved
    return time.perf_counter() - start


def strength_seconds(case: Case) -> float:
    """Strength of a million two-layer layouts of two sizes."""
    rng = np.random.default_rng(1)
    section = case.problem.section
    sizes = np.array([[0.79, 0.60, 0.79, 0.60]])
    counts = rng.integers(0, 4, (_STRENGTHS, 4)) + np.array([[1, 0, 0, 0]])
    groups = BarGroups(
        area=counts * sizes,
        depth=np.broadcast_to(np.array([21.5, 21.56, 19.5, 19.56]), counts.shape),
        diameter=np.broadcast_to(np.array([1.0, 0.875, 1.0, 0.875]), counts.shape),
    )
    start = time.perf_counter()
    flexural_state(section.profile, section.concrete, section.steel, groups)
    return time.perf_counter() - start


def _shown(outcome: Outcome, best: float) -> str:
    if outcome.score is None:
        return f"{outcome.seconds:7.2f} s  no answer"
    return f"{outcome.seconds:7.2f} s  {outcome.score:7.3f} ({outcome.score / best - 1:+.1%})"


def main() -> None:
    """Print all tables."""
    print(f"demo, cold process: median {statistics.median(demo_seconds()):.2f} s of {_RUNS}")
    cases = benchmark_set()
    times = section_seconds(cases)
    print(
        f"one section, 10 candidates with proof, warm: median"
        f" {1e3 * statistics.median(times):.0f} ms, worst {1e3 * max(times):.0f} ms"
        f" over {len(times)} sections"
    )
    for case, seconds in zip(cases, times, strict=True):
        print(f"  {1e3 * seconds:6.0f} ms  {case.name}")
    print(f"strength of {_STRENGTHS:,} two-layer layouts: {strength_seconds(cases[4]):.2f} s")
    print(f"options of a section, bars alone: {options_seconds(''):.2f} s")
    levers = (
        'prices = "demo"\ngrades = ["A615-80", "A615-100"]\nstirrups = ["#3"]\n'
        'widths = ["12 in", "16 in"]\ndepths = ["22 in", "26 in"]'
    )
    print(f"options of a section, all levers, 54 variants: {options_seconds(levers):.2f} s")
    print(f"sizes for a job of 40 sections: {palette_seconds(40):.2f} s")
    for item in beam_benchmarks():
        proved = "proved" if item.proved else "NOT proved"
        print(
            f"{item.what}: {item.seconds:.1f} s, index {item.cost:.1f}, gap {item.gap:.1e},"
            f" {proved}"
        )
    print("best practical score: this tool, every layout enumerated, differential evolution")
    for case in cases:
        wide = case.problem.section.outline.web > _WIDEST_COMPARED
        if case.problem.ranking.by != "practical" or (wide and case.problem.rules.max_layers > 2):
            continue
        start = time.perf_counter()
        best = rank_section(case.problem).layouts[0].score.total
        mine = time.perf_counter() - start
        everything = _shown(enumerate_everything(case.problem), best)
        evolved = _shown(evolve(case.problem), best)
        print(f"  {mine:5.2f} s {best:8.3f} | {everything} | {evolved} | {case.name}", flush=True)


if __name__ == "__main__":
    main()
