"""The main job: from a truss and its actions to forces, reactions and displacements."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from strutbook.actions import Actions
from strutbook.arrays import FloatArray, read_only_floats
from strutbook.balance import load_scale
from strutbook.equilibrium import Equilibrium
from strutbook.errors import InvalidTruss, NotBalanced, StiffnessNeeded, Unstable
from strutbook.stability import Stability, stability_of
from strutbook.statics import forces_by_statics, movement_from_elongations
from strutbook.stiffness import forces_by_stiffness
from strutbook.systems import equilibrium_system, ordered_equilibrium, stiffness_system
from strutbook.truss import Truss


@dataclass(frozen=True, eq=False)
class Analysis:
    """Results of an analysis, one column for each combination."""

    #: (members, combinations) N, tension positive
    forces: FloatArray
    #: (supports, combinations) N, force of the ground on the truss along the direction of the support
    reactions: FloatArray
    #: (joints, dimensions, combinations) m, or None when statics alone gave the forces
    displacements: FloatArray | None
    #: (joints, combinations) N, size of the force that is left over at each joint
    out_of_balance: FloatArray
    #: (combinations,) largest force left over at a joint over the largest load
    residual: FloatArray
    #: rank of the equilibrium matrix, and how far the truss is from a mechanism
    stability: Stability

    def __post_init__(self) -> None:
        for array in (self.forces, self.reactions, self.displacements, self.out_of_balance, self.residual):
            if array is not None:
                array.flags.writeable = False


def analyse(truss: Truss, actions: Actions, factors: ArrayLike | None = None) -> Analysis:
    """Forces, reactions and displacements of a truss.

    A truss that is statically determinate is solved by statics, so that misfits and temperature move its joints
    and add no force at all. Any other needs the axial rigidity of its members.

    Parameters
    ----------
    truss : Truss
        Joints, members, supports and rigidity.
    actions : Actions
        Loads, free elongations and settlements of every case.
    factors : (cases, combinations) array of float, optional
        Factor of each case in each combination; each case by itself when left out.

    Raises
    ------
    Unstable
        When the truss can move, whether or not the loads would move it.
    StiffnessNeeded
        When it is statically indeterminate and has no axial rigidity.
    InvalidTruss
        When the actions or factors do not fit the truss.
    NotBalanced
        When the numbers are so far apart in size that the results are not finite.

    Examples
    --------
    A triangle of 4 m span and 1.5 m height under 12 kN at its apex, and the same load half as large again:

    >>> import numpy as np
    >>> from strutbook import Actions, Supports, Truss, analyse
    >>> truss = Truss(
    ...     joints=[[0, 0], [4, 0], [2, 1.5]],
    ...     members=[[0, 1], [1, 2], [0, 2]],
    ...     supports=Supports.rigid([0, 0, 1], [[1, 0], [0, 1], [0, 1]]),
    ... )
    >>> joint_loads = np.zeros((3, 2, 1))
    >>> joint_loads[2, 1] = -12e3
    >>> actions = Actions(joint_loads, free_elongation=np.zeros((3, 1)), settlement=np.zeros((3, 1)))
    >>> analysis = analyse(truss, actions, factors=[[1.0, 1.5]])
    >>> analysis.forces.round()
    array([[  8000.,  12000.],
           [-10000., -15000.],
           [-10000., -15000.]])
    >>> analysis.reactions[:, 0].round() + 0.0
    array([   0., 6000., 6000.])
    """
    actions.check_fit(truss)
    if factors is None:
        combined = np.eye(actions.cases)
    else:
        combined = read_only_floats(factors, "factors", 2)
        if len(combined) != actions.cases:
            raise InvalidTruss(f"factors has {len(combined)} rows; expected {actions.cases}, one for each case.")
    matrix = ordered_equilibrium(truss)
    case_scale = load_scale(matrix, actions, np.eye(actions.cases))
    loads = matrix.rows_of_vectors(actions.joint_loads)
    imposed = matrix.ground_elongations(actions.settlement)
    imposed[: len(truss.members)] -= actions.free_elongation

    found = stability_of(matrix)
    if found.mechanisms:
        raise Unstable(found)
    movement = None
    if found.indeterminacy == 0:
        system = equilibrium_system(matrix)
        forces = forces_by_statics(matrix, system, loads, case_scale)
        if truss.axial_rigidity is not None:
            strained = forces / matrix.bar_stiffness()[:, np.newaxis]
            movement = movement_from_elongations(system, strained - imposed)
    elif truss.axial_rigidity is None:
        raise StiffnessNeeded(found.indeterminacy)
    else:
        system = stiffness_system(matrix, matrix.bar_stiffness())
        forces, movement = forces_by_stiffness(matrix, system, loads, imposed, case_scale)
    return _results(matrix, actions, combined, forces, movement, found)


def _results(
    matrix: Equilibrium,
    actions: Actions,
    factors: FloatArray,
    case_forces: FloatArray,
    case_movement: FloatArray | None,
    found: Stability,
) -> Analysis:
    """Combine the cases; reactions and joint balance are taken from the combined forces."""
    truss = matrix.truss
    forces = case_forces @ factors
    loads = actions.joint_loads @ factors
    displacements = None
    if case_movement is not None:
        moved = matrix.vectors_of_rows(case_movement) + matrix.ground_movement(actions.settlement)
        displacements = moved @ factors
    # What loads and bars together push on the ground, or leave over where there is no support.
    pushed = loads + matrix.forces_on_joints(forces)
    supports = truss.supports
    reactions = -np.einsum("sd,sdc->sc", truss.frames.dual, pushed[supports.joint])
    members = len(truss.members)
    balance = pushed
    np.add.at(balance, supports.joint, supports.direction[:, :, np.newaxis] * reactions[:, np.newaxis, :])
    reactions[matrix.springs] = -forces[members:]
    out_of_balance = np.sqrt((balance * balance).sum(axis=1))
    residual = out_of_balance.max(axis=0, initial=0.0) / load_scale(matrix, actions, factors)
    if not np.isfinite(forces).all() or not np.isfinite(residual).all():
        raise NotBalanced(float(residual.max(initial=0.0)))
    return Analysis(forces[:members], reactions, displacements, out_of_balance, residual, found)
