"""Views of a case: made once, with the same nodes."""

import numpy as np
import pytest

from onelinefault.engine.case import WHOLE, Case, View
from onelinefault.engine.grids import Grids
from tests.engine.power_station import station

PLANT = station().plant


def test_each_view_is_made_once() -> None:
    grids = Grids(PLANT, Case("iec60909"))
    assert grids.grid() is grids.grid(WHOLE)
    view = View(reactance=0.4)
    assert grids.grid(view) is grids.grid(View(reactance=0.4))
    assert grids.grid(view).view == view and grids.grid(view).equations is grids.grid(view).equations


@pytest.mark.parametrize("view", [View(motors=False), View(inside="p7"), View(reactance=0.4), View(False, False)])
def test_all_views_have_the_same_nodes_and_branches(view: View) -> None:
    grids = Grids(PLANT, Case("iec60909"))
    whole, other = grids.grid().network, grids.grid(view).network
    assert whole.nodes == other.nodes and whole.branch_parts == other.branch_parts
    assert (whole.ratio == other.ratio).all()


def test_a_network_made_elsewhere_is_the_whole_one() -> None:
    network = Grids(PLANT, Case()).grid().network
    grids = Grids(PLANT, Case(), network)
    assert grids.grid().network is network
    slow = grids.grid(View(reactance=0.5)).network
    np.testing.assert_allclose((1 / slow.y_series[:, 0]).imag, 0.5 * (1 / network.y_series[:, 0]).imag)


@pytest.mark.parametrize(("method", "prefault"), [("classical", True), ("iec60909", False)])
def test_iec_60909_has_no_load_flow_before_the_fault(method: str, prefault: bool) -> None:
    grid = Grids(PLANT, Case(method, prefault="no-load")).grid()
    assert (grid.prefault.no_load is not None) is prefault
