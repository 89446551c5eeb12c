"""The methods by name: case and view → policy."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from onelinefault.engine.case import Case, View
from onelinefault.engine.iec60909 import Iec60909
from onelinefault.engine.method import Method
from onelinefault.engine.topology import Topology
from onelinefault.engine.voltages import NominalVoltages
from onelinefault.errors import StudyError


@dataclass(frozen=True)
class Situation:
    """What a method may look at before the network is built."""

    case: Case
    view: View
    topology: Topology
    voltages: NominalVoltages
    frequency_hz: float


_METHODS: Mapping[str, Callable[[Situation], Method]] = {
    "classical": lambda situation: Method(situation.view),
    "iec60909": lambda at: Iec60909.of(at.case, at.view, at.topology, at.voltages),
}


def method_for(situation: Situation) -> Method:
    """The policy of the case's method. Raises StudyError for a method that does not exist."""
    name = situation.case.method
    if name not in _METHODS:
        raise StudyError(f"There is no calculation method {name!r}; choose one of {', '.join(_METHODS)}.")
    return _METHODS[name](situation)
