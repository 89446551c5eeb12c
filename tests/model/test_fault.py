"""The fault asked for."""

import pytest

from onelinefault.model.fault import PHASE_CHOICES, Fault, FaultKind, Place


@pytest.mark.parametrize(("kind", "count"), list(zip(FaultKind, (3, 2, 2, 1), strict=True)))
def test_each_kind_joins_as_many_phases_as_its_name_says(kind: FaultKind, count: int) -> None:
    choices = PHASE_CHOICES[kind]
    assert all(len(set(phases)) == len(phases) == count and set(phases) <= set("abc") for phases in choices)
    assert len({frozenset(phases) for phases in choices}) == len(choices) == {3: 1, 2: 3, 1: 3}[count]
    assert Fault(Place("p1"), kind).faulted_phases == choices[0]
    assert Fault(Place("p1"), kind, choices[-1]).faulted_phases == choices[-1]
