"""What a standard is asked about members, and what it answers."""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np

from strutbook.arrays import BoolArray, FloatArray, IntArray
from strutbook.sections.section import Section, Shape


@dataclass(frozen=True, eq=False)
class MembersToCheck:
    """Members with all that the clauses need; arrays have one entry a member.

    Sections repeat, so clauses work on the few distinct ones first and take rows of the result.
    """

    #: distinct sections
    sections: tuple[Section, ...]
    #: (members,) index into `sections`
    section: IntArray
    #: (members,) m, buckling lengths in the plane of the truss and out of it (K times the length, or as given)
    buckling_length_in: FloatArray
    buckling_length_out: FloatArray
    #: (members,) m², net area in tension; NaN where the gross area is not reduced
    net_area: FloatArray
    #: (members,) shear lag factor U; NaN where it is 1
    shear_lag: FloatArray

    def of_sections(self, name: str) -> FloatArray:
        """(members,) property of the section of each member, by the name of the attribute."""
        return np.array([getattr(section, name) for section in self.sections], dtype=np.float64)[self.section]

    def having(self, *shapes: Shape) -> BoolArray:
        """(members,) whether the section of each member is of one of these shapes."""
        return np.array([section.shape in shapes for section in self.sections], dtype=np.bool_)[self.section]

    def dimension(self, name: str) -> FloatArray:
        """(members,) dimension of the section of each member, NaN where its shape has none of that name."""
        values = [section.dimensions.get(name, np.nan) for section in self.sections]
        return np.array(values, dtype=np.float64)[self.section]


@dataclass(frozen=True, eq=False)
class Step:
    """One line of the workings: a quantity of a clause with its value for every member."""

    #: symbol as the clause writes it: `N_b,Rd`
    symbol: str
    #: what it is, in words
    meaning: str
    #: clause, as the standard numbers it: `EN 1993-1-1 6.3.1.1(3)`
    clause: str
    #: unit in which the value stands: SI (`N`, `m`, `m2`, `Pa`) or empty
    unit: str
    #: (members,) or (members, durations)
    values: FloatArray
    #: the clause's formula in the symbols of the steps, where it is simple: `chi * A * f_y / gamma_M1`
    formula: str = ""


@dataclass(frozen=True, eq=False)
class Capacities:
    """Design capacities of members.

    `durations` are the classes of load duration on which capacities depend (timber), one where they do not (steel).
    """

    #: (members, durations) N, above 0; NaN where not checked
    tension: FloatArray
    compression: FloatArray
    #: (members,) governing slenderness ratio in compression
    slenderness: FloatArray
    #: clauses named by `tension_clause` and `compression_clause`
    clauses: tuple[str, ...]
    #: (members,) index into `clauses` of what governs
    tension_clause: IntArray
    compression_clause: IntArray
    #: member -> why it was not checked in tension or compression; the verdict says it
    tension_not_checked: dict[int, str] = field(default_factory=dict)
    compression_not_checked: dict[int, str] = field(default_factory=dict)
    #: member -> what the capacity takes for granted; the verdict says it
    assumptions: dict[int, str] = field(default_factory=dict)
    #: (members,) largest slenderness that the standard recommends in compression and in tension; NaN for none
    slenderness_limit: FloatArray | None = None
    tension_slenderness_limit: FloatArray | None = None
    #: every intermediate value, in the order of the clauses
    steps: tuple[Step, ...] = ()
