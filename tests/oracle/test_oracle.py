"""The engine against the phase-domain oracle on random plants: every current and voltage, complex, both sides.

ONELINEFAULT_EXAMPLES sets the number of plants (default 40).
"""

import os

from hypothesis import HealthCheck, given, note, settings

from onelinefault.engine.study import Study
from tests.oracle.compare import disagreements
from tests.oracle.phase_domain import solve
from tests.oracle.plants import Problem, problems

EXAMPLES = int(os.environ.get("ONELINEFAULT_EXAMPLES", "40"))


@given(problems())
@settings(
    max_examples=EXAMPLES, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large]
)
def test_engine_and_oracle_agree_on_random_plants(problem: Problem) -> None:
    study = Study(problem.plant, problem.case)
    for fault in problem.faults:
        note(str(fault))
        assert disagreements(study.fault(fault), solve(problem.plant, fault, problem.case)) == []
