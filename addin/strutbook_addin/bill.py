"""The bill of members: what is to be made, by mark, section and length."""

from __future__ import annotations

import numpy as np

from strutbook_addin.results import Results
from strutbook_addin.tables.units import Dimension, unit_of
from strutbook_addin.tables.writing import ResultColumn

#: Lengths that differ by less are one line, m.
SAME_LENGTH = 0.5e-3


def bill_columns(results: Results) -> list[ResultColumn]:
    """Lines of the bill, in the order in which their first members stand in the table."""
    model = results.model
    properties, lengths = model.properties, model.truss.lengths
    sections = [*(section.name for section in properties.sections), ""]
    materials = [*(material.name for material in properties.materials), ""]
    masses = properties.area * properties.density * lengths
    lines: dict[tuple[str, str, str, int], list[int]] = {}
    for member, length in enumerate(lengths.tolist()):
        section, material = sections[properties.section[member]], materials[properties.material[member]]
        key = (model.geometry.groups[member], section, material, round(length / SAME_LENGTH))
        lines.setdefault(key, []).append(member)
    return [
        ResultColumn("Mark", [key[0] for key in lines]),
        ResultColumn("Section", [key[1] for key in lines]),
        ResultColumn("Material", [key[2] for key in lines]),
        ResultColumn(
            "Length",
            np.array([lengths[members[0]] for members in lines.values()]),
            Dimension.LENGTH,
            unit_of("m", Dimension.LENGTH),
        ),
        ResultColumn("Count", np.array([float(len(members)) for members in lines.values()])),
        ResultColumn("Mass", np.array([masses[members].sum() for members in lines.values()]), Dimension.MASS),
    ]
