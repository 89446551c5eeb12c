"""Background solving: every request gets a snapshot and a ticket; late answers are dropped.

The engine (numpy, scipy) is imported in the worker thread, so that the window stands before it is loaded.
"""

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from PySide6.QtCore import QObject, QThread, QTimer, Signal, Slot

from onelinefault.desktop.collecting import Collector
from onelinefault.errors import OneLineFaultError

if TYPE_CHECKING:
    from onelinefault.desktop.session import Session
    from onelinefault.engine.case import Case
    from onelinefault.engine.network import Network
    from onelinefault.engine.results import BusRow, FaultResult
    from onelinefault.model.fault import Fault
    from onelinefault.model.findings import Finding
    from onelinefault.model.plant import Plant


@dataclass(frozen=True)
class Request:
    """A snapshot to solve."""

    ticket: int
    plant: "Plant"
    case: "Case"
    arrangement: str | None
    fault: "Fault | None"


@dataclass(frozen=True)
class Answer:
    """What came out: the standing fault's result, the bus table, the findings, and how long it took."""

    request: Request
    result: "FaultResult | None" = None
    rows: tuple["BusRow", ...] = ()
    findings: tuple["Finding", ...] = ()
    network: "Network | None" = None
    milliseconds: float = 0.0
    trouble: str = ""

    @property
    def nodes(self) -> int:
        """How many nodes the network has."""
        return 0 if self.network is None else len(self.network.nodes)


class _Worker(QObject):
    """Lives in the thread; keeps the last study, so that another fault in the same plant costs one solve."""

    solved = Signal(object)

    def __init__(self) -> None:
        super().__init__()
        self._key: tuple[object, ...] = ()
        self._kept: Any = None

    @Slot(object)
    def work(self, request: Request) -> None:
        """Solve one request; whatever goes wrong becomes a sentence, never a dead thread."""
        from time import perf_counter  # noqa: PLC0415

        start = perf_counter()
        try:
            answer = self._solve(request)
        except OneLineFaultError as error:
            answer = Answer(request, trouble=str(error))
        except Exception as error:  # the window must survive an error of ours; it is shown, not swallowed
            answer = Answer(request, trouble=f"Internal error, please report: {type(error).__name__}: {error}")
        milliseconds = (perf_counter() - start) * 1e3
        self.solved.emit(Answer(**{**answer.__dict__, "milliseconds": milliseconds}))

    def _solve(self, request: Request) -> Answer:
        from onelinefault.studies import all_findings, study_of  # noqa: PLC0415

        key = (id(request.plant), request.case, request.arrangement)
        if key != self._key or self._kept[0] is not request.plant:
            study = study_of(request.plant, request.case, request.arrangement)
            rows = tuple(study.all_buses())
            findings = tuple(all_findings(request.plant, request.case, request.arrangement, study))
            self._key, self._kept = key, (request.plant, study, rows, findings)
        _, study, rows, findings = self._kept
        result, trouble = None, ""
        if request.fault is not None:
            try:
                result = study.fault(request.fault)
            except OneLineFaultError as error:
                trouble = str(error)
        return Answer(request, result, rows, findings, study.network, trouble=trouble)


class Solver(QObject):
    """Keeps the answer that belongs to the session's present state, or says that it is stale.

    changed: a new answer is there, or the present one has become stale; read ``answer`` and ``stale``.
    """

    changed = Signal()
    _ask = Signal(object)

    def __init__(self, session: "Session") -> None:
        super().__init__()
        self._session = session
        self._ticket = 0
        self._busy = False
        self.answer: Answer | None = None
        self.stale = False
        self._thread = QThread()
        self._worker = _Worker()
        self._worker.moveToThread(self._thread)
        self._worker.solved.connect(self._receive)
        self._ask.connect(self._worker.work)
        self._timer = QTimer(self)
        self._timer.setSingleShot(True)
        self._timer.setInterval(0)
        self._timer.timeout.connect(self._send)
        for signal in (session.plant_changed, session.fault_changed, session.choices_changed):
            signal.connect(self.refresh)
        self._collector = Collector(self)
        self._thread.start()

    def refresh(self, *_: object) -> None:
        """The present figures no longer hold: mark them stale and ask anew."""
        self._ticket += 1
        if self.answer is not None and not self.stale:
            self.stale = True
            self.changed.emit()
        self._timer.start()

    def stop(self) -> None:
        """End the thread; nothing is delivered afterwards."""
        self._timer.stop()
        self._ticket += 1
        self._thread.quit()
        self._thread.wait(5000)
        self._collector.stop()

    @property
    def working(self) -> bool:
        """Whether an answer is on its way."""
        return self._busy or self._timer.isActive()

    def _send(self) -> None:
        if self._busy:  # one at a time; the newest state is sent when the worker is free
            return
        self._busy = True
        s = self._session
        self._ask.emit(Request(self._ticket, s.plant, s.choices.case, s.choices.arrangement, s.fault))

    @Slot(object)
    def _receive(self, answer: Answer) -> None:
        self._busy = False
        if answer.request.ticket != self._ticket:
            self._timer.start()
            return
        self.answer, self.stale = answer, False
        self.changed.emit()
