"""What a solved truss says in each table: governing values and their combinations."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

import strutbook
from strutbook_addin.model import Model
from strutbook_addin.model.checks import largest_distance
from strutbook_addin.tables.reading import FloatArray
from strutbook_addin.tables.result_sheets import USES, CombinationColumn, ResultSheet
from strutbook_addin.tables.units import Dimension, Unit
from strutbook_addin.tables.writing import ResultColumn

#: A value below this share of the largest one in its combination is rounding noise and is shown as 0.
NOISE = 1e-10
#: Stands where no combination has the result.
NONE = "-"


@dataclass(frozen=True, eq=False)
class Results:
    """Results of a run, with rounding noise removed."""

    model: Model
    analysis: strutbook.Analysis
    forces: FloatArray  #: (members, combinations) N, tension positive
    slack: NDArray[np.bool_]  #: (members, combinations) whether a member that takes one kind of force only is slack
    reactions: FloatArray  #: (supports, combinations) N along the held directions
    displacements: FloatArray | None  #: (joints, dimensions, combinations) m

    @property
    def strength(self) -> NDArray[np.intp]:
        """Combinations over which forces and reactions are enveloped (all, when none is for strength)."""
        return _used(self.model.combinations.strength)

    @property
    def service(self) -> NDArray[np.intp]:
        """Combinations over which displacements are enveloped (all, when none is for service)."""
        return _used(self.model.combinations.service)

    def joint_columns(self) -> list[ResultColumn]:
        """Columns beside the joints."""
        columns: list[ResultColumn] = []
        if self.displacements is not None:
            service = self.displacements[:, :, self.service]
            governing = np.linalg.norm(service, axis=1).argmax(axis=1)
            values = np.take_along_axis(service, governing[:, None, None], axis=2)[:, :, 0]
            columns += [
                ResultColumn(f"Displacement {axis}", values[:, place], Dimension.LENGTH)
                for place, axis in enumerate(self.model.geometry.axes)
            ]
            moved = np.any(values != 0, axis=1)
            columns.append(ResultColumn("Displaced in", self._names(self.service[governing], moved)))
        worst = self.analysis.out_of_balance.max(axis=1, initial=0.0)
        return [*columns, ResultColumn("Out of balance", worst, Dimension.FORCE)]

    def member_columns(self, length_unit: Unit) -> list[ResultColumn]:
        """Columns beside the members; a new column of lengths takes the unit of the coordinates."""
        forces = self.forces[:, self.strength]
        tension, compression = forces.max(axis=1), forces.min(axis=1)
        return [
            ResultColumn("Length", self.model.truss.lengths, Dimension.LENGTH, length_unit),
            ResultColumn("Tension", np.maximum(tension, 0.0), Dimension.FORCE),
            ResultColumn("Tension in", self._names(self.strength[forces.argmax(axis=1)], tension > 0)),
            ResultColumn("Compression", np.minimum(compression, 0.0), Dimension.FORCE),
            ResultColumn("Compression in", self._names(self.strength[forces.argmin(axis=1)], compression < 0)),
        ]

    def section_columns(self, names: list[str]) -> list[ResultColumn]:
        """Columns beside the sections: the properties that the calculation used; blank where it used none."""
        used = {section.name: section for section in self.model.properties.sections}
        rows = [used.get(name) for name in names]

        def column(name: str, attribute: str, dimension: Dimension) -> ResultColumn:
            values = [np.nan if section is None else getattr(section, attribute) for section in rows]
            return ResultColumn(name, np.array(values, dtype=np.float64), dimension)

        return [
            column("Area used", "area", Dimension.AREA),
            column("Radius y used", "radius_y", Dimension.LENGTH),
            column("Radius z used", "radius_z", Dimension.LENGTH),
            column("Radius min used", "radius_min", Dimension.LENGTH),
        ]

    def support_columns(self, rows: int) -> list[ResultColumn]:
        """Columns beside the supports: components of what each row's directions carry together."""
        held = self.model.held
        vectors = np.zeros((rows, self.model.geometry.dimensions, len(self.strength)))
        np.add.at(vectors, held.row, held.direction[:, :, None] * self.reactions[:, None, self.strength])
        vectors = _without_noise(vectors)
        columns = [
            ResultColumn(f"Reaction {axis} {extreme}", envelope(vectors[:, place], axis=1), Dimension.FORCE)
            for place, axis in enumerate(self.model.geometry.axes)
            for extreme, envelope in (("max", np.max), ("min", np.min))
        ]
        size = np.linalg.norm(vectors, axis=1)
        largest = self._names(self.strength[size.argmax(axis=1)], size.max(axis=1) > 0)
        return [*columns, ResultColumn("Reaction in", largest)]

    def sheets(self) -> dict[str, ResultSheet]:
        """Contents of the result sheets, by sheet."""
        model = self.model
        joints, axes = model.geometry.joints.names, model.geometry.axes
        sheets = {
            "Forces": ResultSheet(
                "Axial force, tension positive",
                Dimension.FORCE,
                [[name] for name in model.geometry.members.names],
                self._by_combination(self.forces),
            ),
            "Reactions": ResultSheet(
                "Force of the support on the truss, positive along its direction",
                Dimension.FORCE,
                [[joints[joint], label] for joint, label in zip(model.held.joint, model.held.label, strict=True)],
                self._by_combination(self.reactions),
            ),
        }
        if self.displacements is not None:
            sheets["Displacements"] = ResultSheet(
                "Displacement along the axis",
                Dimension.LENGTH,
                [[joint, axis] for joint in joints for axis in axes],
                self._by_combination(self.displacements.reshape(-1, self.displacements.shape[2])),
            )
        return sheets

    def largest_displacement(self) -> float:
        """Largest displacement of a joint in a service combination, m; NaN from statics alone."""
        if self.displacements is None:
            return float("nan")
        return float(np.linalg.norm(self.displacements[:, :, self.service], axis=1).max(initial=0.0))

    def deflection_over_limit(self) -> float:
        """Largest displacement over the limit that the sheet `Job` sets; NaN where it sets none."""
        checks, truss = self.model.checks, self.model.truss
        if np.isnan(checks.deflection_limit):
            return float("nan")
        span = checks.span if not np.isnan(checks.span) else largest_distance(truss.joints[truss.supports.joint])
        return self.largest_displacement() * checks.deflection_limit / span if span else float("nan")

    def total_mass(self) -> float:
        """Mass of all members, kg; NaN where an area or a density is not known."""
        properties = self.model.properties
        return float((properties.area * properties.density * self.model.truss.lengths).sum())

    def _by_combination(self, values: FloatArray) -> list[CombinationColumn]:
        combinations = self.model.combinations
        return [
            CombinationColumn(
                name, USES[2] if strength and service else USES[0] if strength else USES[1], values[:, place]
            )
            for place, (name, strength, service) in enumerate(
                zip(combinations.names, combinations.strength, combinations.service, strict=True)
            )
        ]

    def _names(self, combinations: NDArray[np.intp], where: NDArray[np.bool_]) -> list[str]:
        names = self.model.combinations.names
        return [
            names[combination] if shown else NONE
            for combination, shown in zip(combinations.tolist(), where.tolist(), strict=True)
        ]


def solve(model: Model) -> Results:
    """Solve the model in all its combinations.

    Raises
    ------
    strutbook.StrutbookError
        When the truss can move, or statics alone cannot find its forces.
    """
    # Misfits are the last case of the actions and act in every combination.
    factors = np.vstack([model.combinations.factors, np.ones(len(model.combinations.names))])
    if model.takes.any():
        found = strutbook.analyse_one_sided(model.truss, model.actions, model.takes, factors)
        analysis, slack = found.analysis, found.slack
    else:
        analysis = strutbook.analyse(model.truss, model.actions, factors)
        slack = np.zeros(analysis.forces.shape, dtype=np.bool_)
    displacements = analysis.displacements
    return Results(
        model,
        analysis,
        _without_noise(analysis.forces),
        slack,
        _without_noise(analysis.reactions),
        None if displacements is None else _without_noise(displacements),
    )


def _without_noise(values: FloatArray) -> FloatArray:
    """Values of each combination (last axis) with what is only rounding set to zero."""
    if not values.size:
        return values
    size = np.abs(values)
    largest = size.max(axis=tuple(range(values.ndim - 1)))
    return np.where(size < NOISE * largest, 0.0, values)


def _used(flags: NDArray[np.bool_]) -> NDArray[np.intp]:
    return np.flatnonzero(flags) if flags.any() else np.arange(len(flags))
