"""Methods by name."""

import pytest

from onelinefault.engine.build import build_network
from onelinefault.engine.case import Case, View
from onelinefault.engine.iec60909 import Iec60909
from onelinefault.engine.method import CLASSICAL
from onelinefault.errors import StudyError
from tests.oracle.sketch import Sketch


def test_the_case_names_the_method_of_the_network() -> None:
    plant = Sketch().plant
    assert build_network(plant, Case()).method == CLASSICAL
    network = build_network(plant, Case("iec60909"), View(motors=False))
    assert isinstance(network.method, Iec60909) and network.method.view == View(motors=False)


def test_an_unknown_method_is_refused_with_the_known_ones() -> None:
    with pytest.raises(StudyError, match=r"'vde'.*classical, iec60909"):
        build_network(Sketch().plant, Case("vde"))
