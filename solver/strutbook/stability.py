"""Whether a truss can move: the rank of its equilibrium matrix, never the count of its members."""

from __future__ import annotations

from dataclasses import dataclass

from strutbook.equilibrium import Equilibrium
from strutbook.mechanisms import Mechanism, mechanisms_of
from strutbook.null_space import null_space
from strutbook.systems import ordered_equilibrium
from strutbook.truss import Truss


@dataclass(frozen=True, eq=False)
class Stability:
    """Rank of the equilibrium matrix of a truss, and what follows from it."""

    #: rank of the equilibrium matrix
    rank: int
    #: number of free degrees of freedom
    free: int
    #: number of bars: members and spring supports
    bars: int
    #: every independent way in which the truss can move
    mechanisms: tuple[Mechanism, ...]
    #: about the smallest singular value of the equilibrium matrix (no unit): how far a bar must at least stretch when
    #: the joints move by 1; 0 with mechanisms. Below 1e-4 in a truss of everyday size, bars are almost in line.
    margin: float

    @property
    def stable(self) -> bool:
        """Whether the truss cannot move."""
        return not self.mechanisms

    @property
    def indeterminacy(self) -> int:
        """Degree of static indeterminacy: the number of independent states of self-stress."""
        return self.bars - self.rank


def stability(truss: Truss) -> Stability:
    """Rank of the equilibrium matrix and every independent mechanism of a truss.

    Examples
    --------
    >>> from strutbook import Supports, Truss, stability
    >>> truss = Truss([[0, 0], [3, 0], [6, 0]], [[0, 1], [1, 2]], Supports.rigid([0, 0, 2, 2], [[1, 0], [0, 1]] * 2))
    >>> found = stability(truss)
    >>> found.rank, found.free, found.indeterminacy
    (1, 2, 1)
    >>> found.mechanisms[0].joints, found.mechanisms[0].infinitesimal
    ((1,), True)
    """
    return stability_of(ordered_equilibrium(truss))


def stability_of(matrix: Equilibrium) -> Stability:
    """Stability of the truss to which an equilibrium matrix belongs."""
    basis, margin = null_space(matrix)
    count = basis.shape[1]
    mechanisms = mechanisms_of(matrix, basis) if count else ()
    return Stability(matrix.free - count, matrix.free, matrix.bars, mechanisms, margin)
