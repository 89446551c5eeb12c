"""The plant: parts, wires, sheets, arrangements, title block. An immutable value; an edit makes a new one."""

from collections.abc import Mapping
from dataclasses import dataclass, field, replace

from onelinefault.model.fields import rating, words
from onelinefault.model.part import Part
from onelinefault.model.quantity import APPARENT_POWER, FREQUENCY, PER_UNIT, Quantity, read_quantity

Point = tuple[int, int]


@dataclass(frozen=True, slots=True)
class End:
    """One end of a wire: a terminal of a part; ``at`` is the place along a bus bar in modules, None elsewhere."""

    part: str
    terminal: str
    at: int | None = None


@dataclass(frozen=True, slots=True)
class Wire:
    """The drawn joint between two terminals. corners: points (modules) that a person has set, in order from a to b."""

    id: str
    a: End
    b: End
    corners: tuple[Point, ...] = ()

    @property
    def ends(self) -> tuple[End, End]:
        """Both ends."""
        return self.a, self.b


# paper sizes in mm, landscape (ISO 216; ANSI/ASME Y14.1)
PAPER_MM: dict[str, tuple[float, float]] = {
    "A4": (297, 210), "A3": (420, 297), "A2": (594, 420), "A1": (841, 594), "A0": (1189, 841),
    "ANSI A": (279.4, 215.9), "ANSI B": (431.8, 279.4), "ANSI C": (558.8, 431.8), "ANSI D": (863.6, 558.8),
    "ANSI E": (1117.6, 863.6),
}  # fmt: skip
MODULE_MM = 2.5


@dataclass(frozen=True, slots=True)
class Sheet:
    """A drawing page. paper: a key of PAPER_MM; upright turns it to portrait."""

    id: str
    title: str = "Sheet"
    paper: str = "A4"
    upright: bool = False

    @property
    def size_mm(self) -> tuple[float, float]:
        """Width and height in mm."""
        width, height = PAPER_MM[self.paper]
        return (height, width) if self.upright else (width, height)

    @property
    def size(self) -> tuple[float, float]:
        """Width and height in modules."""
        width, height = self.size_mm
        return width / MODULE_MM, height / MODULE_MM


@dataclass(frozen=True)
class Arrangement:
    """A running arrangement: how switch positions and in-service marks differ from what the sheet shows."""

    id: str
    name: str
    closed: Mapping[str, bool] = field(default_factory=dict)
    in_service: Mapping[str, bool] = field(default_factory=dict)


@dataclass(frozen=True, kw_only=True)
class Document:
    """What the title block and the calculation need to know of the whole plant."""

    name: str | None = words("Plant", default="New plant", group="Title block")
    customer: str | None = words("For", group="Title block")
    drawn_by: str | None = words("Drawn", group="Title block")
    checked_by: str | None = words("Checked", group="Title block")
    revision: str | None = words("Revision", group="Title block")
    date: str | None = words("Date", group="Title block", help="As it shall stand in the title block.")
    frequency: Quantity | None = rating(
        "Frequency", FREQUENCY, default="50 Hz", at_least=10, at_most=400, group="Calculation"
    )
    base_power: Quantity | None = rating(
        "Base power",
        APPARENT_POWER,
        default="100 MVA",
        group="Calculation",
        help="Results in kA do not depend on it; per-unit values do.",
    )
    prefault_voltage: Quantity | None = rating(
        "Voltage before the fault",
        PER_UNIT,
        default="1.0 pu",
        at_least=0.5,
        at_most=1.5,
        group="Calculation",
        help="At the fault, as a multiple of nominal.",
    )

    @property
    def frequency_hz(self) -> float:
        """System frequency in Hz."""
        return (self.frequency or read_quantity("50 Hz", FREQUENCY)).to("Hz")

    @property
    def base_mva(self) -> float:
        """Three-phase base power in MVA."""
        return (self.base_power or read_quantity("100 MVA", APPARENT_POWER)).to("MVA")

    @property
    def prefault_pu(self) -> float:
        """Voltage before the fault as a multiple of nominal."""
        return (self.prefault_voltage or read_quantity("1.0 pu", PER_UNIT)).to("pu")


@dataclass(frozen=True)
class Plant:
    """The whole document.

    tags: where a person has dragged a figure's callout: key → offset in modules. next_number: the next id's number.
    """

    document: Document = field(default_factory=Document)
    parts: Mapping[str, Part] = field(default_factory=dict)
    wires: Mapping[str, Wire] = field(default_factory=dict)
    sheets: tuple[Sheet, ...] = (Sheet("s1"),)
    arrangements: tuple[Arrangement, ...] = ()
    tags: Mapping[str, Point] = field(default_factory=dict)
    next_number: int = 1

    def sheet(self, sheet_id: str) -> Sheet | None:
        """The sheet with this id, or None."""
        return next((s for s in self.sheets if s.id == sheet_id), None)

    def on_sheet(self, sheet_id: str) -> list[Part]:
        """Parts on a sheet, in the order they were placed."""
        return [p for p in self.parts.values() if p.sheet == sheet_id]

    def wires_of(self, part_id: str) -> list[Wire]:
        """Wires that end on a part."""
        return [w for w in self.wires.values() if part_id in (w.a.part, w.b.part)]

    def named(self, name: str) -> list[Part]:
        """Parts of this name, ignoring case and outer spaces."""
        wanted = name.strip().casefold()
        return [p for p in self.parts.values() if p.name.strip().casefold() == wanted]

    def arranged(self, arrangement_id: str | None) -> "Plant":
        """The plant with the switch positions and in-service marks of an arrangement; None or unknown: as drawn."""
        chosen = next((a for a in self.arrangements if a.id == arrangement_id), None)
        if chosen is None:
            return self
        parts = dict(self.parts)
        for part_id, closed in chosen.closed.items():
            if part_id in parts and hasattr(parts[part_id], "closed"):
                parts[part_id] = replace(parts[part_id], closed=closed)  # type: ignore[call-arg]
        for part_id, running in chosen.in_service.items():
            if part_id in parts:
                parts[part_id] = replace(parts[part_id], in_service=running)
        return replace(self, parts=parts)
