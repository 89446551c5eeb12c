"""What a part puts into the three sequence networks, and how its ratings are read for that.

Triples are (positive, negative, zero); impedances of a stamp are in per unit of the plant's base power and of the
voltage named beside them. ``OPEN`` is an admittance of nothing.
"""

import cmath
import math
from dataclasses import dataclass, field

from onelinefault.engine.case import Case
from onelinefault.engine.method import CLASSICAL, Correction, Method
from onelinefault.errors import StudyError
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.part import Part, describe
from onelinefault.model.quantity import Quantity
from onelinefault.model.values import Neutral, VectorGroup

Triple = tuple[complex, complex, complex]

OPEN = 0j
NOTHING: Triple = (OPEN, OPEN, OPEN)
INNER = ""  # in place of a terminal's name: the star point inside a part with three windings


@dataclass(frozen=True, slots=True)
class Setting:
    """What every stamp depends on besides its part: plant base in MVA, frequency in Hz, case, and what it decides."""

    base_mva: float
    frequency_hz: float
    case: Case
    method: Method = CLASSICAL

    def base_ohm(self, line_kv: float) -> float:
        """Base impedance in ohm at a line-to-line voltage in kV: V² / S."""
        return line_kv * line_kv / self.base_mva


@dataclass(frozen=True, slots=True)
class BranchStamp:
    """A branch between two terminals of a part, see ``network`` for its picture; the ratio stands at terminal a.

    lead_deg: how far positive-sequence voltage at b leads that at a without load.
    """

    a: str
    b: str
    y: Triple
    ratio: tuple[float, float, float] = (1.0, 1.0, 1.0)
    y_a: Triple = NOTHING
    y_b: Triple = NOTHING
    lead_deg: float = 0.0


@dataclass(frozen=True, slots=True)
class ShuntStamp:
    """An admittance from a terminal to earth. source: it drives current."""

    terminal: str
    y: Triple
    source: bool = False


@dataclass(frozen=True, slots=True)
class ConverterStamp:
    """A limited current source at a terminal; limit in per unit of the plant's base current at its node."""

    terminal: str
    limit_pu: float
    angle_deg: float
    constant: bool = False


@dataclass(frozen=True, slots=True)
class StarPoint:
    """An earthed star point, read at branch ``index`` of the part (element "from" or "to") or at its "shunt"."""

    side: str
    element: str
    index: int = 0


@dataclass(frozen=True, slots=True)
class Stamps:
    """All that one part puts into the network. inner_kv: voltage of its inner star point in kV, 0 without one.

    corrections: the factors of the method in it.
    """

    branches: tuple[BranchStamp, ...] = ()
    shunts: tuple[ShuntStamp, ...] = ()
    converters: tuple[ConverterStamp, ...] = ()
    star_points: tuple[StarPoint, ...] = ()
    inner_kv: float = 0.0
    findings: tuple[Finding, ...] = field(default=())
    corrections: tuple[Correction, ...] = ()


class PartLeftOutError(StudyError):
    """A part cannot be calculated; the finding says why. It never leaves ``build_network``."""

    def __init__(self, finding: Finding) -> None:
        super().__init__(finding.message)
        self.finding = finding


def left_out(part: Part, code: str, reason: str, remedy: str, name: str = "") -> PartLeftOutError:
    """The error for a part that cannot be calculated: "transformer T1 is left out: <reason>"."""
    message = f"{part.title} is left out: {reason}"
    return PartLeftOutError(Finding(Severity.ERROR, code, message, remedy, (part.id,), name))


def needed(part: Part, name: str) -> Quantity:
    """A rating in use. Raises PartLeftOutError when it is neither given nor typical."""
    value = part.value(name)
    if not isinstance(value, Quantity):
        label = describe(type(part), name).label
        raise left_out(part, "missing-rating", f"its {label} is not given", f"Enter {label} of {part.title}.", name)
    return value


def in_unit(part: Part, name: str, unit: str) -> float:
    """A rating in use as a number. Raises PartLeftOutError when it is missing, EntryError for another dimension."""
    return needed(part, name).to(unit)


def optional(part: Part, name: str, unit: str) -> float | None:
    """A rating in use as a number, or None when it is neither given nor typical."""
    value = part.value(name)
    return value.to(unit) if isinstance(value, Quantity) else None


def word(part: Part, name: str) -> str:
    """A choice in use."""
    return str(part.value(name))


def count(part: Part, name: str) -> int:
    """A whole number in use; 1 when there is none."""
    value = part.value(name)
    return value if isinstance(value, int) else 1


def group_of(part: Part, windings: int) -> VectorGroup:
    """The vector group. Raises PartLeftOutError when it names another number of windings."""
    group = part.value("vector_group")
    assert isinstance(group, VectorGroup)  # the field has a default
    if len(group.connections) != windings:
        example = str(describe(type(part), "vector_group").default.text)  # type: ignore[union-attr]
        raise left_out(
            part,
            "vector-group",
            f"its vector group {group.text} names {len(group.connections)} windings, not {windings}",
            f"Enter a vector group such as {example}.",
            "vector_group",
        )
    return group


def earthing_ohm(part: Part, name: str, line_kv: float, brought_out: bool = True) -> complex | None:
    """Impedance in ohm between a star point and earth, None when it is isolated or not brought out.

    A resistor given in A is sized at the line-to-neutral voltage of its own winding (common practice).
    """
    neutral = part.value(name)
    if not brought_out or not isinstance(neutral, Neutral) or not neutral.earthed:
        return None
    return neutral.z_ohm(line_kv)


def admittance(part: Part, z: complex) -> complex:
    """1/z. Raises PartLeftOutError for a vanishing impedance: the part would be a dead short."""
    if z == 0 or not cmath.isfinite(z) or not cmath.isfinite(1 / z):
        raise left_out(
            part,
            "impedance-zero",
            "its impedance is zero",
            f"Enter the impedance of {part.title}; join its ends with a wire or a closed switch if it has none.",
        )
    return 1 / z


def with_x_over_r(size: float, x_over_r: float) -> complex:
    """The impedance of a magnitude and a ratio X/R."""
    return size * complex(1.0, x_over_r) / math.hypot(1.0, x_over_r)


def zero_sequence_assumed(part: Part, name: str, taken: str) -> Finding:
    """The warning that a zero-sequence rating is missing and what was taken in its place."""
    label = describe(type(part), name).label
    return Finding(
        Severity.WARNING,
        "zero-sequence-assumed",
        f"{part.title}: {label} is not given; {taken} is taken. Earth-fault currents rest on that.",
        f"Enter {label} of {part.title}.",
        (part.id,),
        name,
    )
