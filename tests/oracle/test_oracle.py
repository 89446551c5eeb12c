"""The engine against the phase-domain oracle on random plants: every current and voltage, complex, both sides.

ONELINEFAULT_EXAMPLES sets the number of plants (default 40).
"""

import os

import pytest
from hypothesis import HealthCheck, given, note, settings

from onelinefault.engine.case import Case
from onelinefault.engine.study import Study
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.oracle.compare import TOLERANCE, current_gaps, disagreements
from tests.oracle.phase_domain import Oracle
from tests.oracle.plants import Problem, problems
from tests.oracle.sketch import Sketch

EXAMPLES = int(os.environ.get("ONELINEFAULT_EXAMPLES", "40"))


@given(problems())
@settings(
    max_examples=EXAMPLES, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large]
)
def test_engine_and_oracle_agree_on_random_plants(problem: Problem) -> None:
    study, oracle = Study(problem.plant, problem.case), Oracle(problem.plant, problem.case)
    for fault in problem.faults:
        note(str(fault))
        assert disagreements(study.fault(fault), oracle.fault(fault)) == []


@pytest.mark.parametrize("kind", list(FaultKind))
@pytest.mark.parametrize("group", ["Dyn11", "YNyn0", "YNd5"])
def test_transformers_of_unlike_taps_in_parallel(kind: FaultKind, group: str) -> None:
    """Their ratios drive a current round the loop before the fault: counted when it is asked for, else left out."""
    sketch = Sketch()
    high, low = sketch.bus(33.0), sketch.bus(11.0)
    sketch.hang("supply", high, nominal_voltage="33", fault_level_max="700 MVA", x_over_r="9", x0_over_x1="2")
    for tap, impedance in (("2.5 %", "10 %"), ("-5 %", "9 %")):
        sketch.hang(
            "transformer", high, low, rated_power="16", high_voltage="33", low_voltage="11", impedance=impedance,
            x_over_r="18", vector_group=group, tap=tap, neutral_high="solid", neutral_low="resistor 1 ohm",
            zero_sequence_impedance="95 %",
        )  # fmt: skip
    for bus in (high, low):
        fault = Fault(Place(*bus), kind)
        loaded = Case(prefault="no-load")
        assert disagreements(Study(sketch.plant, loaded).fault(fault), Oracle(sketch.plant, loaded).fault(fault)) == []
        result, answer = Study(sketch.plant, Case()).fault(fault), Oracle(sketch.plant, Case()).fault(fault)
        assert [sentence for gap, sentence in current_gaps(result, answer) if gap > TOLERANCE] == []
