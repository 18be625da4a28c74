"""What stands in a new workbook: the rows of every table, in the units of its headers."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

from strutbook_templates.trusses import Truss
from strutbook_templates.unit_systems import UnitSystem

Value = str | float | int | None
Row = Mapping[str, Value]


@dataclass(frozen=True, eq=False)
class Contents:
    """Rows by sheet and then by the schema's name of the column."""

    system: UnitSystem
    dimension: int  #: 2 leaves out the columns that are about z
    rows: Mapping[str, Sequence[Row]]
    job: Mapping[str, str | float] = field(default_factory=dict)  #: values by label of the sheet Job
    cases: Sequence[str] = ()  #: headers of the factor columns on the sheet Combinations
    truss: Truss | None = None  #: drawn on the sheet Picture before the first run

    @property
    def title(self) -> str:
        """Title of the job, for the head of printed pages."""
        return str(self.job.get("Title", ""))

    @property
    def combinations(self) -> int:
        """How many combinations there are."""
        return len(self.rows.get("Combinations", ()))


def geometry_rows(truss: Truss, sections: Mapping[str, str], material: str) -> dict[str, list[Row]]:
    """Rows of the joints, members and supports of a truss.

    Parameters
    ----------
    truss : Truss
        The truss, in the unit of length of the workbook.
    sections : mapping
        Name of the section of each group of members.
    material : str
        Name of the material of every member.
    """
    return {
        "Joints": [
            {"Joint": name, **{axis: round(value, 6) for axis, value in zip("xyz", place, strict=False)}}
            for name, place in truss.joints.items()
        ],
        "Members": [
            {
                "Member": bar.name,
                "From": bar.start,
                "To": bar.end,
                "Group": bar.group,
                "Section": sections[bar.group],
                "Material": material,
            }
            for bar in truss.members
        ],
        "Supports": [{"Joint": joint, "Holds": holds} for joint, holds in truss.supports.items()],
    }
