"""Everything that can be handed over of one plant in one state: bus table, findings, annotated sheets.

The study behind them is made once; nothing is computed before it is asked for.
"""

from collections.abc import Iterable, Sequence
from functools import cached_property
from pathlib import Path

from onelinefault.engine.case import Case
from onelinefault.engine.results import FaultResult
from onelinefault.engine.study import Study
from onelinefault.errors import OutputError
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.findings import Finding
from onelinefault.model.plant import Plant
from onelinefault.report.tables import BusTable
from onelinefault.studies import Asked, all_findings, arrangement_named, fault_rows, in_order, study_of


class Outputs:
    """The outputs of a plant.

    arrangement: name or id of a running arrangement, None: as drawn. noticed: findings from opening the file.
    Raises StudyError when there is no such arrangement.
    """

    def __init__(
        self, plant: Plant, case: Case, arrangement: str | None = None, noticed: Iterable[Finding] = ()
    ) -> None:
        self._drawn = plant
        self._arrangement = arrangement_named(plant, arrangement)
        self._noticed = tuple(noticed)
        self.case = case
        self.plant = plant.arranged(self._arrangement)

    @cached_property
    def study(self) -> Study:
        """The study, with missing ratings completed."""
        return study_of(self._drawn, self.case, self._arrangement)

    @property
    def arrangement(self) -> str:
        """The running arrangement in words."""
        names = {one.id: one.name for one in self._drawn.arrangements}
        return names[self._arrangement] if self._arrangement else "as drawn"

    @cached_property
    def findings(self) -> tuple[Finding, ...]:
        """What the file, the parts and the network have to say, errors first."""
        found = all_findings(self._drawn, self.case, self._arrangement, self.study)
        return tuple(in_order([*self._noticed, *found]))

    def table(self, asked: Asked | None = None) -> BusTable:
        """The bus table with what it rests on. Raises StudyError or NoSuchPlaceError."""
        rows = tuple(fault_rows(self.study, asked or Asked()))
        return BusTable(self.plant, self.case, rows, self.findings, self.arrangement)

    def largest(self, table: BusTable) -> FaultResult | None:
        """The three-phase fault at the bus of a table where it is largest; None when nothing feeds one."""
        fed = [row for row in table.rows if row.ik_ka > 0 and row.kind == FaultKind.THREE_PHASE]
        if not fed:
            return None
        return self.study.fault(Fault(Place(max(fed, key=lambda row: row.ik_ka).part)))

    def draw(
        self,
        result: FaultResult | None,
        path: Path,
        sheet_titles: Sequence[str] = (),
        detail: int = 2,
        paper_mm: tuple[float, float] | None = None,
    ) -> list[Path]:
        """Write the annotated sheets as PDF, SVG or PNG. sheet_titles: only these, by title or id.

        Raises OutputError when a sheet is not there or the file cannot be written, ImportError where Qt does not load.
        """
        from onelinefault.report.drawing import write_drawing  # noqa: PLC0415 - Qt is loaded when a sheet is drawn

        return write_drawing(
            self.plant, self.study.network, result, path,
            sheet_ids=tuple(self._sheet_id(title) for title in sheet_titles),
            detail=detail, arrangement=self.arrangement, paper_mm=paper_mm,
        )  # fmt: skip

    def _sheet_id(self, title: str) -> str:
        for sheet in self.plant.sheets:
            if title.strip().casefold() in (sheet.title.strip().casefold(), sheet.id):
                return sheet.id
        known = ", ".join(sheet.title for sheet in self.plant.sheets)
        raise OutputError(f"there is no sheet called {title!r}; the plant has {known}")
