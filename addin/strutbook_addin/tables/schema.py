"""The one declaration of every table: sheets, columns, units, bounds and what they mean.

Reading, validation, error sentences, templates, notes on headers and the reference page all follow
from it. A new column is one new entry here (and whatever uses its values).
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import Enum
from functools import cached_property, lru_cache

from strutbook_addin.tables.units import Dimension


class Kind(Enum):
    """What a cell of a column holds."""

    NUMBER = "a number"
    TEXT = "a text"
    NAME = "a name"  #: text or number that names something; 1 and 1.0 are the same name
    CHOICE = "a choice"


class Bound(Enum):
    """Which numbers a column takes."""

    ANY = "a number"
    POSITIVE = "a number above 0"
    NOT_NEGATIVE = "a number of 0 or more"


class Role(Enum):
    """Who fills a column in."""

    INPUT = "input"
    RESULT = "result"


@dataclass(frozen=True)
class Column:
    """One column of a table (or one label of the `Job` sheet)."""

    name: str
    kind: Kind
    meaning: str  #: one sentence for the header's note and the reference page
    role: Role = Role.INPUT
    dimension: Dimension | None = None
    required: bool = False
    bound: Bound = Bound.ANY
    choices: tuple[str, ...] = ()
    refers_to: str = ""  #: sheet whose first column holds the names that are allowed here
    key: bool = False  #: names the row; no two rows share it

    @property
    def expected(self) -> str:
        """What a cell of this column takes, as an error sentence says it."""
        if self.kind is Kind.NUMBER:
            return str(self.bound.value)
        if self.kind is Kind.CHOICE:
            return "one of: " + ", ".join(self.choices)
        if self.refers_to:
            return f"a name from the sheet {self.refers_to}"
        return str(self.kind.value)


@dataclass(frozen=True)
class OpenColumns:
    """Columns whose headers the user chooses: one for each case, or one for each combination."""

    of: str  #: `cases` or `combinations`
    meaning: str
    role: Role
    dimension: Dimension | None = None


@dataclass(frozen=True)
class Table:
    """One table: the sheet it stands on and its columns."""

    sheet: str
    meaning: str
    columns: tuple[Column, ...]
    required: bool = False
    open_columns: OpenColumns | None = None
    labels: bool = False  #: labels in column A and values in column B instead of a header row

    @cached_property
    def inputs(self) -> tuple[Column, ...]:
        """Columns that the user fills in."""
        return tuple(column for column in self.columns if column.role is Role.INPUT)

    @cached_property
    def results(self) -> tuple[Column, ...]:
        """Columns that a run fills in."""
        return tuple(column for column in self.columns if column.role is Role.RESULT)

    @cached_property
    def by_normal_name(self) -> dict[str, Column]:
        """Columns by their name as headers are compared."""
        return {normal(column.name): column for column in self.columns}

    def column(self, name: str) -> Column:
        """Column by its exact name."""
        return self.by_normal_name[normal(name)]


@lru_cache(maxsize=4096)
def normal(name: str) -> str:
    """Form in which names of sheets and headers are compared: no case, spaces or underscores.

    >>> normal("Buckling length_in") == normal("buckling  Length IN")
    True
    """
    return "".join(name.split()).replace("_", "").casefold()


def _name(name: str, meaning: str, refers_to: str = "", *, required: bool = True, key: bool = False) -> Column:
    return Column(name, Kind.NAME, meaning, refers_to=refers_to, required=required, key=key)


def _number(
    name: str,
    dimension: Dimension | None,
    meaning: str,
    *,
    required: bool = False,
    bound: Bound = Bound.ANY,
) -> Column:
    return Column(name, Kind.NUMBER, meaning, dimension=dimension, required=required, bound=bound)


def _text(name: str, meaning: str) -> Column:
    return Column(name, Kind.TEXT, meaning)


def _result(name: str, dimension: Dimension | None, meaning: str) -> Column:
    return Column(name, Kind.NUMBER, meaning, Role.RESULT, dimension)


def _result_text(name: str, meaning: str) -> Column:
    return Column(name, Kind.TEXT, meaning, Role.RESULT)


JOB = Table(
    "Job",
    "What the calculation is, and what the last run says about it.",
    (
        _text("Title", "Name of the calculation; it heads the printed sheets."),
        _text("Reference", "Number of the job or drawing."),
        _text("Prepared by", "Who filled in the tables."),
        _text("Checked by", "Who checked the calculation."),
        _text("Date", "Date of the calculation."),
        _text("Standard", "Standard to which members are checked; blank checks none."),
        _text(
            "Factors",
            "Factors of the standard in place of the recommended ones, such as gamma_M1 = 1.1; gamma_M2 = 1.25.",
        ),
        _text(
            "Combination rule",
            "Rule that fills an empty sheet Combinations from the natures of the cases; blank fills nothing in.",
        ),
        _text("Workings for", "Members whose checks are written out on the sheet Workings, or the word worst."),
        _number(
            "Slenderness limit",
            None,
            "Largest slenderness of a member in compression; blank is what the standard recommends, as a remark.",
            bound=Bound.POSITIVE,
        ),
        _number(
            "Deflection limit",
            None,
            "The largest deflection may be the span divided by this number; blank is no limit.",
            bound=Bound.POSITIVE,
        ),
        _number(
            "Span",
            Dimension.LENGTH,
            "Span for the deflection limit; blank is the largest distance between supports.",
            bound=Bound.POSITIVE,
        ),
        _result_text("Solved at", "When the results were written (UTC)."),
        _result_text("Solved by", "Version of strutbook that wrote the results."),
        _result_text("Inputs", "Digest of the tables from which the results follow."),
        _result_text("Outcome", "What the run came to, in one sentence."),
        _result("Static indeterminacy", None, "Degree of static indeterminacy, from the rank of the matrix."),
        _result("Joint residual", None, "Largest force out of balance at a joint over the largest load."),
        _result("Largest tension", Dimension.FORCE, "Largest tension in a member."),
        _result("Largest compression", Dimension.FORCE, "Largest compression in a member, negative."),
        _result(
            "Largest displacement",
            Dimension.LENGTH,
            "Largest displacement of a joint in a service combination.",
        ),
        _result("Deflection over limit", None, "Largest displacement over the deflection limit; above 1 fails."),
        _result("Largest utilisation", None, "Largest force over capacity of a member; above 1 fails."),
        _result_text("Governing member", "Member with the largest utilisation."),
        _result("Total mass", Dimension.MASS, "Mass of all members, without connections."),
    ),
    labels=True,
)

JOINTS = Table(
    "Joints",
    "The joints and where they are: y is up in a plane truss, z is up in a space truss.",
    (
        _name("Joint", "Name of the joint.", key=True),
        _number("x", Dimension.LENGTH, "Coordinate x.", required=True),
        _number("y", Dimension.LENGTH, "Coordinate y; up in a plane truss.", required=True),
        _number("z", Dimension.LENGTH, "Coordinate z, up; blank everywhere makes a plane truss."),
        _result("Displacement x", Dimension.LENGTH, "Displacement along x in the combination that governs."),
        _result("Displacement y", Dimension.LENGTH, "Displacement along y in the combination that governs."),
        _result("Displacement z", Dimension.LENGTH, "Displacement along z in the combination that governs."),
        _result_text("Displaced in", "Service combination with the largest displacement of this joint."),
        _result("Out of balance", Dimension.FORCE, "What is left when all forces at the joint are added."),
    ),
    required=True,
)

MEMBERS = Table(
    "Members",
    "The members, the joints they join and what they are made of.",
    (
        _name("Member", "Name of the member.", key=True),
        _name("From", "Joint at one end.", "Joints"),
        _name("To", "Joint at the other end.", "Joints"),
        _text("Group", "What the member is, in your own words (top chord, diagonal)."),
        _name(
            "Section",
            "Section of the member: a name from the sheet Sections, or a designation such as SHS 100x100x5.",
            "Sections",
            required=False,
        ),
        _name(
            "Material",
            "Material of the member: a name from the sheet Materials, or a grade such as S355.",
            "Materials",
            required=False,
        ),
        _number(
            "Area",
            Dimension.AREA,
            "Cross-section area; it goes before the area of the section.",
            bound=Bound.POSITIVE,
        ),
        _number(
            "E",
            Dimension.STRESS,
            "Modulus of elasticity; it goes before that of the material.",
            bound=Bound.POSITIVE,
        ),
        _number("Misfit", Dimension.LENGTH, "How much longer than its place the member was made (+ too long)."),
        Column(
            "Takes",
            Kind.CHOICE,
            "Force that the member can carry; it goes slack under the other. Blank is both.",
            choices=("both", "tension", "compression"),
        ),
        _number(
            "K in",
            None,
            "Buckling length over length for buckling in the plane of the truss (about the section's axis y); "
            "blank is 1.",
            bound=Bound.POSITIVE,
        ),
        _number(
            "K out",
            None,
            "Buckling length over length for buckling out of the plane (about the section's axis z); blank is 1.",
            bound=Bound.POSITIVE,
        ),
        _number(
            "Buckling length in",
            Dimension.LENGTH,
            "Buckling length in the plane of the truss; it goes before K in.",
            bound=Bound.POSITIVE,
        ),
        _number(
            "Buckling length out",
            Dimension.LENGTH,
            "Buckling length out of the plane of the truss; it goes before K out.",
            bound=Bound.POSITIVE,
        ),
        _number(
            "Net area", Dimension.AREA, "Area less holes at the connections; blank is no holes.", bound=Bound.POSITIVE
        ),
        _number(
            "Shear lag",
            None,
            "Part of the net area that is effective where not all of the section is connected; blank is 1.",
            bound=Bound.POSITIVE,
        ),
        _text("Standard", "Standard for this member; blank is that of the sheet Job."),
        _result("Length", Dimension.LENGTH, "Distance between the joints."),
        _result("Tension", Dimension.FORCE, "Largest tension over the strength combinations."),
        _result_text("Tension in", "Combination with the largest tension."),
        _result("Compression", Dimension.FORCE, "Largest compression over the strength combinations, negative."),
        _result_text("Compression in", "Combination with the largest compression."),
        _result("Tension capacity", Dimension.FORCE, "Design capacity in tension."),
        _result("Compression capacity", Dimension.FORCE, "Design capacity in compression."),
        _result("Slenderness", None, "Governing slenderness in compression."),
        _result("Utilisation", None, "Largest force over capacity in a strength combination; above 1 fails."),
        _result_text("Governed by", "Clause and combination of the utilisation."),
        _result_text("Verdict", "Whether the member passes the checks listed, fails, or was not checked and why."),
    ),
    required=True,
)

SUPPORTS = Table(
    "Supports",
    "Where the truss is held; a joint may stand on several rows.",
    (
        _name("Joint", "Joint that is held.", "Joints"),
        Column(
            "Holds",
            Kind.TEXT,
            "Directions held: axes 'x y', an angle '30 deg' (plane truss), or a vector '0.6, 0.8, 0'.",
            required=True,
        ),
        _number(
            "Stiffness",
            Dimension.SPRING,
            "Stiffness of a spring support; blank is rigid.",
            bound=Bound.POSITIVE,
        ),
        *(
            _result(
                f"Reaction {axis} {extreme}",
                Dimension.FORCE,
                f"{words} reaction along {axis}; positive along {axis}.",
            )
            for axis in "xyz"
            for extreme, words in (("max", "Largest"), ("min", "Smallest"))
        ),
        _result_text("Reaction in", "Combination with the largest reaction."),
    ),
    required=True,
)

LOADS = Table(
    "Loads",
    "Forces at joints.",
    (
        _name("Case", "Load case; blank everywhere makes one case called Loads.", "Cases", required=False),
        _name("Joint", "Joint that is loaded.", "Joints"),
        _number("Fx", Dimension.FORCE, "Force along x."),
        _number("Fy", Dimension.FORCE, "Force along y; a downward load is negative in a plane truss."),
        _number("Fz", Dimension.FORCE, "Force along z; a downward load is negative in a space truss."),
    ),
    required=True,
)

MEMBER_LOADS = Table(
    "Member loads",
    "Loads along members, shared between their end joints by statics, and temperature changes.",
    (
        _name("Case", "Load case; blank everywhere makes one case called Loads.", "Cases", required=False),
        _name("Member", "Member that is loaded.", "Members"),
        Column(
            "Per",
            Kind.CHOICE,
            "Load on the member's length, or on its projection square to the load; blank is length.",
            choices=("length", "projection"),
        ),
        _number("wx", Dimension.LINE_LOAD, "Line load along x."),
        _number("wy", Dimension.LINE_LOAD, "Line load along y."),
        _number("wz", Dimension.LINE_LOAD, "Line load along z."),
        _number("Temperature change", Dimension.TEMPERATURE, "Warming of the member (cooling is negative)."),
    ),
)

SETTLEMENTS = Table(
    "Settlements",
    "Movements of the ground under supports.",
    (
        _name("Case", "Load case; blank everywhere makes one case called Loads.", "Cases", required=False),
        _name("Joint", "Joint whose support moves.", "Joints"),
        _number("dx", Dimension.LENGTH, "Movement along x."),
        _number("dy", Dimension.LENGTH, "Movement along y; settlement is negative in a plane truss."),
        _number("dz", Dimension.LENGTH, "Movement along z; settlement is negative in a space truss."),
    ),
)

NATURES = (
    "permanent",
    "imposed",
    "snow",
    "wind",
    "temperature",
    "settlement",
    "moving",
    "accidental",
)

CASES = Table(
    "Cases",
    "The load cases; without this sheet they are those named in the load tables.",
    (
        _name("Case", "Name of the load case.", key=True),
        Column("Nature", Kind.CHOICE, "What kind of action it is.", choices=NATURES),
        _number("Self weight", None, "Factor on the weight of the members in this case; blank is none."),
    ),
)

COMBINATIONS = Table(
    "Combinations",
    "Factors on the cases; without this sheet each case is a combination of its own.",
    (
        _name("Combination", "Name of the combination.", key=True),
        Column(
            "For",
            Kind.CHOICE,
            "What the combination is used for; blank is both.",
            choices=("strength", "service"),
        ),
    ),
    open_columns=OpenColumns("cases", "Factor on the case in the header; blank is 0.", Role.INPUT),
)

SECTIONS = Table(
    "Sections",
    "Cross-sections that members name.",
    (
        _name("Section", "Name of the section.", key=True),
        _text("Designation", "Designation of a standard section, where the name of the row is not one."),
        _number(
            "Area", Dimension.AREA, "Cross-section area; blank takes that of the designation.", bound=Bound.POSITIVE
        ),
        _number(
            "Radius y",
            Dimension.LENGTH,
            "Radius of gyration about y, for buckling in the plane of the truss; blank takes the designation's.",
            bound=Bound.POSITIVE,
        ),
        _number(
            "Radius z",
            Dimension.LENGTH,
            "Radius of gyration about z, for buckling out of the plane; blank takes the designation's.",
            bound=Bound.POSITIVE,
        ),
        _number(
            "Radius min",
            Dimension.LENGTH,
            "Smallest radius of gyration; blank takes the designation's, or the smaller of the other two.",
            bound=Bound.POSITIVE,
        ),
        Column(
            "Buckling curve",
            Kind.CHOICE,
            "Buckling curve of EN 1993-1-1 table 6.2 for both axes; blank follows from the designation.",
            choices=("a0", "a", "b", "c", "d"),
        ),
        _result("Area used", Dimension.AREA, "Area that the calculation used."),
        _result("Radius y used", Dimension.LENGTH, "Radius about y that the calculation used."),
        _result("Radius z used", Dimension.LENGTH, "Radius about z that the calculation used."),
        _result("Radius min used", Dimension.LENGTH, "Smallest radius that the calculation used."),
    ),
)

MATERIALS = Table(
    "Materials",
    "Materials that members name.",
    (
        _name("Material", "Name of the material.", key=True),
        _number(
            "E",
            Dimension.STRESS,
            "Modulus of elasticity; blank takes that of the grade of this name.",
            bound=Bound.POSITIVE,
        ),
        _number("Yield", Dimension.STRESS, "Yield strength; blank takes that of the grade.", bound=Bound.POSITIVE),
        _number(
            "Ultimate", Dimension.STRESS, "Ultimate strength; blank takes that of the grade.", bound=Bound.POSITIVE
        ),
        _number("Density", Dimension.DENSITY, "Mass per volume; needed for self weight.", bound=Bound.NOT_NEGATIVE),
        _number("Expansion", Dimension.EXPANSION, "Thermal expansion; needed for temperature changes."),
    ),
)

FORCES = Table(
    "Forces",
    "Axial force of every member in every combination; tension is positive.",
    (Column("Member", Kind.NAME, "Name of the member.", Role.RESULT, key=True),),
    open_columns=OpenColumns("combinations", "Axial force, tension positive.", Role.RESULT, Dimension.FORCE),
)

REACTIONS = Table(
    "Reactions",
    "Force of every support on the truss in every combination, positive along its direction.",
    (
        Column("Joint", Kind.NAME, "Joint that is held.", Role.RESULT),
        Column("Direction", Kind.TEXT, "Direction that is held; the reaction is positive along it.", Role.RESULT),
    ),
    open_columns=OpenColumns("combinations", "Reaction, positive along the direction.", Role.RESULT, Dimension.FORCE),
)

DISPLACEMENTS = Table(
    "Displacements",
    "Displacement of every joint in every combination.",
    (
        Column("Joint", Kind.NAME, "Name of the joint.", Role.RESULT),
        Column("Direction", Kind.TEXT, "Axis along which the displacement is counted.", Role.RESULT),
    ),
    open_columns=OpenColumns("combinations", "Displacement along the axis.", Role.RESULT, Dimension.LENGTH),
)

FINDINGS = Table(
    "Findings",
    "What the last run has to say.",
    (
        _result_text("Level", "stop: not solved; fail: does not pass; look: look at it; note: worth knowing."),
        _result_text("Where", "Link to the cell."),
        _result_text("What", "What was found and what was expected."),
        _result_text("What to do", "What mends it."),
    ),
)

STOCK = Table(
    "Stock",
    "Sections from which `strutbook size` chooses; without this sheet, name families on the command line.",
    (
        _name("Section", "Designation of a section that may be chosen."),
        _text("Group", "Group of members for which it may be chosen; blank is any."),
    ),
)

BILL = Table(
    "Bill",
    "Bill of members; a workbook that has this sheet gets it filled in.",
    (
        _result_text("Mark", "Group of the members."),
        _result_text("Section", "Section of the members."),
        _result_text("Material", "Material of the members."),
        _result("Length", Dimension.LENGTH, "Length of each, between joints."),
        _result("Count", None, "How many there are."),
        _result("Mass", Dimension.MASS, "Mass of all of them, without connections."),
    ),
)

WORKINGS = Table(
    "Workings",
    "Checks of the members that `Workings for` on `Job` names, clause by clause.",
    (
        _result_text("Member", "Member that is checked."),
        _result_text("Clause", "Clause of the standard."),
        _result_text("Symbol", "Symbol as the clause writes it."),
        _result_text("Meaning", "What it is."),
        _result("Value", None, "Its value, in the unit beside it."),
        _result_text("Unit", "Unit of the value."),
        _result_text("By", "Formula, where it is simple."),
    ),
)

SIZING = Table(
    "Sizing",
    "What `strutbook size` chose for each group, beside what stood there.",
    (
        _result_text("Group", "Group of members."),
        _result("Members", None, "How many members the group has."),
        _result_text("Section before", "Section that stood there."),
        _result_text("Section chosen", "Lightest section that passes."),
        _result("Mass before", Dimension.MASS, "Mass of the group before."),
        _result("Mass chosen", Dimension.MASS, "Mass of the group with the section that was chosen."),
        _result("Utilisation", None, "Largest utilisation with the section that was chosen."),
        _result_text("Governed by", "Member, clause and combination that governed."),
        _result_text("Remark", "What an engineer should know of this group."),
    ),
)

INPUT_TABLES = (
    JOINTS,
    MEMBERS,
    SUPPORTS,
    LOADS,
    MEMBER_LOADS,
    SETTLEMENTS,
    CASES,
    COMBINATIONS,
    SECTIONS,
    MATERIALS,
)
RESULT_TABLES = (FORCES, REACTIONS, DISPLACEMENTS, FINDINGS)
#: Tables of which the sheets are made when somebody asks for them.
ON_REQUEST = (STOCK, BILL, WORKINGS, SIZING)
#: Tables of a template, in the order of their sheets.
TEMPLATE_TABLES = (JOB, *INPUT_TABLES, *RESULT_TABLES)
#: Every table.
TABLES = (*TEMPLATE_TABLES, *ON_REQUEST)
BY_SHEET = {table.sheet: table for table in TABLES}
