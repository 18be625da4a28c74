"""Checking members over the arithmetic that combining and enveloping their forces takes (at most 2 times).

20,000 members in 100 combinations: capacities and utilisations, against the product that forms the combined forces
and a pass of largest and smallest values over them. Both in one run, the median.
"""

from __future__ import annotations

import argparse
import sys
from statistics import median
from time import perf_counter

import numpy as np

from strutbook.checks.capacity import MembersToCheck
from strutbook.checks.registry import standard
from strutbook.materials import material
from strutbook.sections import families, section
from strutbook_addin.member_checks import utilisations


def main(argv: list[str] | None = None) -> int:
    """Print the ratio for a few standards."""
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("--quick", action="store_true", help="small and once, to see that it runs")
    options = parser.parse_args(argv)
    members, combinations, repetitions = (200, 10, 1) if options.quick else (20_000, 100, 7)
    random = np.random.default_rng(4)
    sizes = tuple(section(name) for name in families()["SHS"])
    index = random.integers(0, len(sizes), members)
    lengths = random.uniform(1, 4, members)
    unknown = np.full(members, np.nan)
    tried = MembersToCheck(sizes, index, lengths, lengths, unknown, unknown)
    cases = random.uniform(-2e5, 2e5, (members, 12))
    factors = random.uniform(0, 1.5, (12, combinations))
    duration = np.zeros(combinations, dtype=np.intp)
    for name, grade in (("EN 1993-1-1", "S355"), ("AISC 360-22 LRFD", "A992"), ("Working stress", "S355")):
        check, steel = standard(name).check, (material(grade),)
        ratios = []
        for _ in range(repetitions):
            start = perf_counter()
            forces = cases @ factors
            _ = forces.max(axis=1), forces.min(axis=1)
            plain = perf_counter() - start
            start = perf_counter()
            capacities = check(tried, steel, np.zeros(members, dtype=np.intp))
            utilisations(capacities, forces, duration)
            ratios.append((perf_counter() - start) / plain)
        print(f"{name:<20} {members} members in {combinations} combinations {median(ratios):6.2f}   (at most 2)")
    return 0


if __name__ == "__main__":
    sys.exit(main())
