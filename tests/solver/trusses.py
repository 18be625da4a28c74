"""Trusses for the tests of the solver: grown joint by joint, or regular."""

from __future__ import annotations

import numpy as np
from hypothesis import strategies as st

from strutbook import Actions, Supports, Truss
from strutbook.arrays import FloatArray


@st.composite
def determinate_trusses(draw: st.DrawFn, dimensions: int | None = None) -> Truss:
    """Statically determinate trusses: each new joint is tied to as many others as there are dimensions.

    L. Henneberg's construction (Statik der starren Systeme, 1886; from memory): a simplex on statically determinate
    supports, then joints by two (three in space) bars that do not lie in one line (plane).
    """
    size = dimensions or draw(st.sampled_from([2, 3]))
    random = np.random.default_rng(draw(st.integers(0, 2**32 - 1)))
    count = draw(st.integers(size + 1, 14))
    joints = random.uniform(-5, 5, (count, size))
    joints[: size + 1] = np.vstack([np.zeros(size), 4 * np.eye(size)]) + random.uniform(-0.5, 0.5, (size + 1, size))
    members = [[first, second] for second in range(size + 1) for first in range(second)]
    for joint in range(size + 1, count):
        for _ in range(200):
            tied = random.choice(joint, size, replace=False)
            arms = joints[tied] - joints[joint]
            lengths = np.linalg.norm(arms, axis=1)
            if lengths.min() > 0.3 and abs(np.linalg.det(arms / lengths[:, np.newaxis])) > 0.2:
                break
            joints[joint] = random.uniform(-5, 5, size)
        members += [[int(other), joint] for other in tied]
    axes = np.eye(size)
    if size == 2:
        supports = Supports.rigid([0, 0, 1], [axes[0], axes[1], axes[1]])
    else:
        supports = Supports.rigid([0, 0, 0, 1, 1, 2], [*axes, axes[1], axes[2], axes[2]])
    rigidity = random.uniform(1e6, 1e9, len(members))
    return Truss(joints, members, supports, rigidity)


def with_more_bars(truss: Truss, bars: int, random: np.random.Generator) -> Truss:
    """The same truss with further members between joints that are not joined."""
    joined = {frozenset(pair) for pair in truss.members.tolist()}
    count = len(truss.joints)
    free = [[a, b] for a in range(count) for b in range(a) if frozenset((a, b)) not in joined]
    chosen = [free[place] for place in random.permutation(len(free))[:bars]]
    members = [*truss.members.tolist(), *chosen]
    return Truss(truss.joints, members, truss.supports, random.uniform(1e6, 1e9, len(members)))


def random_actions(truss: Truss, cases: int, random: np.random.Generator) -> Actions:
    """Loads, misfits and settlements of ordinary size."""
    return Actions(
        random.uniform(-1e5, 1e5, (*truss.joints.shape, cases)),
        random.uniform(-1e-3, 1e-3, (len(truss.members), cases)),
        random.uniform(-1e-2, 1e-2, (len(truss.supports), cases)),
    )


def loads_only(truss: Truss, joint_loads: FloatArray) -> Actions:
    """Joint loads (joints, dimensions, cases) and nothing else."""
    cases = joint_loads.shape[2]
    return Actions(joint_loads, np.zeros((len(truss.members), cases)), np.zeros((len(truss.supports), cases)))


def panelled_girder(panels: int, rigidity: float = 1e8, without_diagonal: tuple[int, ...] = ()) -> Truss:
    """Parallel chords 1 m apart with square panels, one diagonal each, on a pin and a roller."""
    below, above = np.arange(panels + 1), np.arange(panels + 1) + panels + 1
    joints = np.array([[x, y] for y in (0.0, 1.0) for x in range(panels + 1)])
    diagonals = [[below[i], above[i + 1]] for i in range(panels) if i not in without_diagonal]
    members = np.vstack(
        [np.column_stack([row[:-1], row[1:]]) for row in (below, above)]
        + [np.column_stack([below, above]), np.array(diagonals).reshape(-1, 2)]
    )
    supports = Supports.rigid([0, 0, panels], [[1, 0], [0, 1], [0, 1]])
    return Truss(joints, members, supports, np.full(len(members), rigidity))


def square_grid(side: int, rigidity: float = 1e8) -> Truss:
    """Square cells with one diagonal each, on a pin and a roller: highly redundant."""
    number = np.arange((side + 1) ** 2).reshape(side + 1, side + 1)
    y, x = np.divmod(number.ravel(), side + 1)
    pairs = [
        np.column_stack([first.ravel(), second.ravel()])
        for first, second in (
            (number[:, :-1], number[:, 1:]),
            (number[:-1], number[1:]),
            (number[:-1, :-1], number[1:, 1:]),
        )
    ]
    members = np.vstack(pairs)
    supports = Supports.rigid([0, 0, side], [[1, 0], [0, 1], [0, 1]])
    return Truss(np.column_stack([x, y]).astype(float), members, supports, np.full(len(members), rigidity))
