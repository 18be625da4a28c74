"""Results as pandas frames, made on demand for people who go on in Python; SI units (N, m).

>>> from strutbook_addin import solve_file
>>> from strutbook_addin.frames import forces
>>> solved = solve_file("footbridge.xlsx", None)  # doctest: +SKIP
>>> forces(solved.outcome.results).idxmin()  # doctest: +SKIP
"""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import pandas as pd  # noqa: TID251 - frames are made here and nowhere else

    from strutbook_addin.results import Results


def forces(results: Results) -> pd.DataFrame:
    """Axial forces in N, tension positive: a row a member, a column a combination."""
    import pandas as pd  # noqa: TID251 - imported when somebody asks for a frame

    model = results.model
    index = pd.Index(model.geometry.members.names, name="Member")
    return pd.DataFrame(results.forces, index, list(model.combinations.names))


def reactions(results: Results) -> pd.DataFrame:
    """Reactions in N, positive along their directions: a row a held direction."""
    import pandas as pd  # noqa: TID251 - imported when somebody asks for a frame

    model = results.model
    joints = [model.geometry.joints.names[joint] for joint in model.held.joint]
    index = pd.MultiIndex.from_arrays([joints, model.held.label], names=["Joint", "Direction"])
    return pd.DataFrame(results.reactions, index, list(model.combinations.names))


def displacements(results: Results) -> pd.DataFrame | None:
    """Displacements in m: a row a joint and axis; None where forces come from statics alone."""
    import pandas as pd  # noqa: TID251 - imported when somebody asks for a frame

    if results.displacements is None:
        return None
    model = results.model
    index = pd.MultiIndex.from_product(
        [model.geometry.joints.names, list(model.geometry.axes)], names=["Joint", "Direction"]
    )
    flat = results.displacements.reshape(len(index), -1)
    return pd.DataFrame(flat, index, list(model.combinations.names))
