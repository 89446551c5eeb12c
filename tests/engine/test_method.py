"""The classical method as a policy: everything as rated; and what no method takes."""

import pytest

from onelinefault.engine.case import WHOLE, Case, View
from onelinefault.engine.method import AS_RATED, BEHIND_CONVERTER, CLASSICAL, UNCORRECTED, Method, is_drive
from onelinefault.engine.sequence_stamps import Setting
from onelinefault.model.conductors import Cable
from onelinefault.model.fault import FaultKind
from onelinefault.model.sources import InductionMotor, Supply, SynchronousGenerator
from onelinefault.model.transforming import Transformer, Transformer3


def test_the_classical_method_corrects_nothing() -> None:
    assert CLASSICAL.supply(Supply(id="p1"), 10.0) is UNCORRECTED
    assert CLASSICAL.transformer(Transformer(id="p1"), 0.1, 10.0, 0.4) is UNCORRECTED
    assert CLASSICAL.pair(Transformer3(id="p1"), ("high", "low"), 0.1, 10.0) is UNCORRECTED
    assert CLASSICAL.synchronous(SynchronousGenerator(id="p1"), 0.15, 10.0) is AS_RATED
    assert CLASSICAL.induction(InductionMotor(id="p1")) is AS_RATED
    assert CLASSICAL.warmth(Cable(id="p1")) is None
    assert CLASSICAL.driving([10.0, 0.4]) is None
    assert CLASSICAL.taps and CLASSICAL.charging and not CLASSICAL.constant_converters
    assert not CLASSICAL.assumes(SynchronousGenerator(id="p1"))
    assert (UNCORRECTED.name, UNCORRECTED.value) == ("", 1.0)


def test_faults_are_calculated_in_the_method_s_own_view() -> None:
    assert CLASSICAL.view_of(3, FaultKind.LINE_TO_EARTH) == WHOLE == View()
    assert Method(View(motors=False)).view_of(0, FaultKind.THREE_PHASE) == View(motors=False)


@pytest.mark.parametrize(
    ("drive", "behind", "taken"),
    [("", False, True), ("direct", False, True), ("regenerating converter", True, True), ("converter", True, False)],
)
def test_a_motor_whose_converter_cannot_feed_back_feeds_no_fault(drive: str, behind: bool, taken: bool) -> None:
    # IEC 60909-0, 6.11: only reversible converter drives count, with 3 times rated current and R/X = 0.1
    motor = InductionMotor(id="p1").with_text("drive", drive)
    assert is_drive(motor) is behind
    assert CLASSICAL.takes(motor) is taken
    assert CLASSICAL.induction(motor) is (BEHIND_CONVERTER if behind else AS_RATED)
    assert (BEHIND_CONVERTER.locked_rotor_ratio, BEHIND_CONVERTER.x_over_r) == (3.0, 10.0)


def test_the_setting_of_stamps_is_classical_when_nothing_else_is_said() -> None:
    assert Setting(100.0, 50.0, Case()).method is CLASSICAL
