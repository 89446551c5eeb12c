"""What a new plant starts with."""

from onelinefault.desktop.new_plant import new_plant
from onelinefault.desktop.settings import METRIC, US


def test_metric_and_us() -> None:
    metric, us = new_plant(METRIC), new_plant(US)
    assert (metric.document.frequency_hz, metric.sheets[0].paper) == (50, "A4")
    assert (us.document.frequency_hz, us.sheets[0].paper) == (60, "ANSI A")
    assert metric.parts == us.parts == {}
