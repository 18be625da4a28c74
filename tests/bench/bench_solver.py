"""Ratios of the solver's goals 1 to 4, and of an everyday truss; each of two things timed in one run.

Goal 1: order + assemble + factor + one solve, over factoring and solving alone (at most 1.3).
Goal 2: entries of the factors, over those of the ordering that keeps the zeros of the pattern (at most 1.1).
Goal 3: joint residual over the largest load (at most 1e-9).
Goal 4: naming mechanisms over assembling and factoring (at most 3).
"""

from __future__ import annotations

import argparse
import sys
from collections.abc import Callable
from statistics import median
from time import perf_counter

import numpy as np
from scipy.sparse import csc_array
from scipy.sparse.linalg import SuperLU, splu

from strutbook import Actions, Supports, Truss, analyse, describe_mechanism, stability
from strutbook.equilibrium import Equilibrium, equilibrium
from strutbook.ordering import minimum_degree_order
from strutbook.sparse import factor_stiffness, sparse_stiffness


def grid(side: int, without_diagonal: int = 0) -> Truss:
    """Square cells with one diagonal each; without some diagonals and their neighbours' it is still redundant."""
    number = np.arange((side + 1) ** 2).reshape(side + 1, side + 1)
    y, x = np.divmod(number.ravel(), side + 1)
    pairs = (
        (number[:, :-1], number[:, 1:]),
        (number[:-1], number[1:]),
        (number[:-1, :-1], number[1:, 1:]),
    )
    members = np.vstack([np.column_stack([first.ravel(), second.ravel()]) for first, second in pairs])
    members = members[: len(members) - without_diagonal]
    supports = Supports.rigid([0, 0, side], [[1, 0], [0, 1], [0, 1]])
    return Truss(np.column_stack([x, y]).astype(float), members, supports, np.full(len(members), 1e8))


def rotated(truss: Truss) -> Truss:
    """The same truss at 17 degrees, so that no member is along an axis."""
    angle = np.radians(17.0)
    turn = np.array([[np.cos(angle), -np.sin(angle)], [np.sin(angle), np.cos(angle)]])
    supports = Supports.rigid(truss.supports.joint, truss.supports.direction @ turn.T)
    return Truss(truss.joints @ turn.T, truss.members, supports, truss.axial_rigidity)


def shuffled(truss: Truss) -> Truss:
    """The same truss with its joints and members in another order."""
    random = np.random.default_rng(5)
    place = random.permutation(len(truss.joints))
    joints = np.empty_like(truss.joints)
    joints[place] = truss.joints
    members = place[truss.members][random.permutation(len(truss.members))]
    supports = Supports.rigid(place[truss.supports.joint], truss.supports.direction)
    return Truss(joints, members, supports, truss.axial_rigidity)


def seconds(work: Callable[[], object]) -> float:
    """Time of one call."""
    start = perf_counter()
    work()
    return perf_counter() - start


def ordered(truss: Truss) -> Equilibrium:
    """B with its rows in the order of elimination."""
    return equilibrium(truss, minimum_degree_order(truss))


def bare_factor(stiffness: csc_array) -> SuperLU:
    """The library's factorisation with no more than its own settings."""
    return splu(stiffness, permc_spec="NATURAL", diag_pivot_thresh=0.0, options={"SymmetricMode": True})


def goal_1(truss: Truss, repetitions: int) -> float:
    """Whole route over bare factorisation and solve, at the same ordering."""
    stiffness = sparse_stiffness(ordered(truss), ordered(truss).bar_stiffness())
    load = np.ones(stiffness.shape[0])

    def whole() -> None:
        matrix = ordered(truss)
        factor_stiffness(matrix, matrix.bar_stiffness()).solve(load[:, np.newaxis])

    return median(seconds(whole) / seconds(lambda: bare_factor(stiffness).solve(load)) for _ in range(repetitions))


def goal_2(truss: Truss) -> float:
    """Entries of our factors over those of minimum degree on the pattern with its zeros."""
    matrix = ordered(truss)
    ours = factor_stiffness(matrix, matrix.bar_stiffness()).factor
    pattern = sparse_stiffness(equilibrium(truss), matrix.bar_stiffness())
    reference = splu(pattern, permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.0, options={"SymmetricMode": True})
    return (ours.L.nnz + ours.U.nnz) / (reference.L.nnz + reference.U.nnz)


def goal_3(truss: Truss) -> float:
    """Residual of a whole analysis."""
    loads = np.zeros((*truss.joints.shape, 1))
    loads[:, 1] = -1e3
    actions = Actions(loads, np.zeros((len(truss.members), 1)), np.zeros((len(truss.supports), 1)))
    return float(analyse(truss, actions).residual.max())


def goal_4(side: int, repetitions: int) -> float:
    """Naming the mechanism of a grid with a loose corner, over assembling and factoring it."""
    whole = grid(side)
    # The corner joint keeps one bar only.
    corner = len(whole.joints) - 1
    loose = Truss(
        whole.joints,
        [pair for pair in whole.members.tolist() if corner not in pair] + [[corner - 1, corner]],
        whole.supports,
    )
    names = [str(joint) for joint in range(len(loose.joints))]

    def name() -> None:
        (mechanism,) = stability(loose).mechanisms
        if mechanism.joints != (corner,):
            raise AssertionError(f"joints {mechanism.joints} were named, not {corner}")
        describe_mechanism(mechanism, loose, names)

    def plain() -> None:
        matrix = ordered(loose)
        factor_stiffness(matrix, np.ones(matrix.bars), 1e-12)

    return median(seconds(name) / seconds(plain) for _ in range(repetitions))


def everyday(repetitions: int) -> float:
    """A 53-member truss in 8 combinations, validated and balanced, over bare assembly and LAPACK."""
    truss = grid(4)
    random = np.random.default_rng(2)
    actions = Actions(random.standard_normal((*truss.joints.shape, 3)) * 1e3, np.zeros((56, 3)), np.zeros((3, 3)))
    factors = random.uniform(0, 1.5, (3, 8))
    matrix = equilibrium(truss)
    b, rigidity = matrix.dense(), matrix.bar_stiffness()
    loads = matrix.rows_of_vectors(actions.joint_loads) @ factors

    def bare() -> None:
        movement = np.linalg.solve((b * rigidity) @ b.T, loads)
        _ = rigidity[:, np.newaxis] * (b.T @ movement)

    def ours() -> None:
        analyse(Truss(truss.joints, truss.members, truss.supports, truss.axial_rigidity), actions, factors)

    return median(seconds(ours) / seconds(bare) for _ in range(20 * repetitions))


def main(argv: list[str] | None = None) -> int:
    """Print every ratio beside its goal."""
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("--quick", action="store_true", help="small and once, to see that it runs")
    parser.add_argument("--members", type=int, default=200_000, help="members of the large grid")
    options = parser.parse_args(argv)
    repetitions = 1 if options.quick else 5
    members = 6_000 if options.quick else options.members
    side = round((members / 3) ** 0.5)
    large = grid(side)
    lines = [
        (
            f"goal 1: whole route over bare factor and solve, {len(large.members)} members",
            goal_1(large, repetitions),
            1.3,
        )
    ]
    smaller = grid(side // 3)
    for what, truss in (("aligned", smaller), ("rotated", rotated(smaller)), ("shuffled", shuffled(smaller))):
        lines.append((f"goal 2: entries of the factors, {what}, {len(truss.members)} members", goal_2(truss), 1.1))
    lines.append((f"goal 3: joint residual over the largest load, {len(large.members)} members", goal_3(large), 1e-9))
    lines.append(
        ("goal 4: naming mechanisms over assemble and factor", goal_4(round((members / 30) ** 0.5), repetitions), 3)
    )
    for what, value, most in lines:
        print(f"{what:<75} {value:9.3g}   (at most {most:g})")
    print(f"{'a 56-member truss in 8 combinations over bare assembly and LAPACK':<75} {everyday(repetitions):9.3g}")
    return 0


if __name__ == "__main__":
    sys.exit(main())
