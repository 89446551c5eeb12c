"""The rows of the drawer's tables as values: the buses with their fault currents, and the findings."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, overload

from onelinefault.model.fault import FaultKind
from onelinefault.model.figures import figure
from onelinefault.model.findings import Finding, Severity

if TYPE_CHECKING:
    from onelinefault.engine.results import BusRow, FaultResult
    from onelinefault.model.plant import Plant

_MARKS: Final = {Severity.ERROR: "exceeded", Severity.WARNING: "near", Severity.HINT: "holds"}
_ORDER: Final = (Severity.ERROR, Severity.WARNING, Severity.HINT)
_KIND_WORDS: Final = {
    FaultKind.THREE_PHASE: "3 ph", FaultKind.LINE_TO_LINE: "2 ph",
    FaultKind.TWO_LINES_TO_EARTH: "2 ph–E", FaultKind.LINE_TO_EARTH: "1 ph–E",
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class Cell:
    """What a table shows in one place, and the value it is sorted by."""

    text: str
    order: float | str


def number(value: float | None) -> Cell:
    """A figure; a dash where there is none."""
    return Cell("–", float("-inf")) if value is None else Cell(figure(value), value)


def words(text: str) -> Cell:
    """A text, sorted without regard to case."""
    return Cell(text, text.casefold())


@dataclass(frozen=True, slots=True)
class Head:
    """A heading: short on the screen, full where the table is copied to, explained in a tooltip."""

    short: str
    full: str = ""
    tip: str = ""

    @property
    def copied(self) -> str:
        """The heading for a copy."""
        return self.full or self.short


@dataclass(frozen=True, slots=True)
class TableRow:
    """One row: its cells, and the parts it speaks of."""

    cells: tuple[Cell, ...]
    parts: tuple[str, ...]
    mark: str = ""
    hint: str = ""


class Rows(Sequence[TableRow]):
    """Rows that are made when they are first looked at: most of a long table is never seen.

    parts: of each row, known at once.
    """

    def __init__(self, parts: Sequence[tuple[str, ...]] = (), make: Callable[[int], TableRow] | None = None) -> None:
        self.parts = list(parts)
        self._make = make
        self._made: dict[int, TableRow] = {}

    def __len__(self) -> int:
        return len(self.parts)

    @overload
    def __getitem__(self, index: int) -> TableRow: ...
    @overload
    def __getitem__(self, index: slice) -> list[TableRow]: ...
    def __getitem__(self, index: int | slice) -> TableRow | list[TableRow]:
        if isinstance(index, slice):
            return [self[i] for i in range(*index.indices(len(self)))]
        if index < 0 or index >= len(self.parts) or self._make is None:
            raise IndexError(index)
        if index not in self._made:
            self._made[index] = self._make(index)
        return self._made[index]


def bus_heads(kind: FaultKind) -> tuple[Head, ...]:
    """The headings of the bus table; peak and X/R are of one kind of fault."""
    kinds = tuple(Head(f"I″ {word}", f"I″ {word} kA", _CURRENT_TIP) for word in _KIND_WORDS.values())
    word = _KIND_WORDS[kind]
    return (
        Head("Bus"),
        Head("kV", "nominal kV"),
        *kinds,
        Head(f"peak {word}", f"peak {word} kA", "Largest asymmetrical peak of the kind of fault chosen, kA"),
        Head(f"X/R {word}", tip="Of the impedance that the current of the chosen kind of fault flows through"),
        Head("level MVA", "fault level MVA", "Three-phase fault level: √3 · nominal voltage · I″, MVA"),
        Head("left %", "voltage left %", "Smallest phase-to-earth voltage while the fault stands, % of nominal"),
    )


_CURRENT_TIP: Final = "Initial symmetrical short-circuit current of the largest phase, kA"


def bus_rows(rows: Sequence[BusRow], result: FaultResult | None, kind: FaultKind) -> Rows:
    """One row a bus. result: the standing fault, for the voltage left; kind: whose peak and X/R are shown."""
    by_bus: dict[str, dict[str, BusRow]] = {}
    for row in rows:
        by_bus.setdefault(row.part, {})[str(row.kind)] = row
    buses, left = list(by_bus), _voltages_left(by_bus, result)

    def make(index: int) -> TableRow:
        return _bus_row(buses[index], by_bus[buses[index]], left.get(buses[index]), kind)

    return Rows([(bus,) for bus in buses], make)


def _voltages_left(buses: Iterable[str], result: FaultResult | None) -> dict[str, float]:
    if result is None:
        return {}
    left, node_of = result.voltage_left, result.network.node_of
    return {bus: float(left[node_of[bus, "bar"]]) * 100 for bus in buses if (bus, "bar") in node_of}


def _bus_row(part: str, found: dict[str, BusRow], left_percent: float | None, kind: FaultKind) -> TableRow:
    any_row = next(iter(found.values()))
    chosen, three = found.get(str(kind)), found.get(str(FaultKind.THREE_PHASE))
    cells = (
        words(any_row.bus),
        Cell(f"{any_row.nominal_kv:.4g}", any_row.nominal_kv),
        *(number(found[str(k)].ik_ka if str(k) in found else None) for k in _KIND_WORDS),
        number(chosen.peak_ka if chosen else None),
        number(chosen.x_over_r if chosen else None),
        number(three.fault_level_mva if three else None),
        Cell("", float("-inf")) if left_percent is None else Cell(f"{left_percent:.0f}", left_percent),
    )
    assumed = "; ".join(dict.fromkeys(text for row in found.values() for text in row.assumed))
    return TableRow(cells, (part,), hint=f"Rests on typical or guessed data: {assumed}" if assumed else "")


FINDING_HEADS: Final = (Head("", "Severity"), Head("Finding"), Head("What to do"), Head("Parts"))


def finding_rows(findings: Sequence[Finding], plant: Plant) -> Rows:
    """One row a finding, errors first."""
    ordered = sorted(findings, key=_rank)

    def make(index: int) -> TableRow:
        return _finding_row(ordered[index], plant)

    return Rows([finding.parts for finding in ordered], make)


def _rank(finding: Finding) -> int:
    return _ORDER.index(finding.severity)


def _finding_row(finding: Finding, plant: Plant) -> TableRow:
    names = [plant.parts[key].name or plant.parts[key].title for key in finding.parts if key in plant.parts]
    cells = (
        Cell(finding.severity.value, _rank(finding)),
        words(finding.message),
        words(finding.remedy),
        words(", ".join(names)),
    )
    return TableRow(cells, finding.parts, _MARKS[finding.severity], f"{finding.message}. {finding.remedy}")
