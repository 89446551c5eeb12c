"""One view's results: sites alike in all views, results of their own."""

import numpy as np

from onelinefault.engine.case import Case, View
from onelinefault.engine.grids import Grids
from onelinefault.engine.scene import Scene
from onelinefault.model.fault import Fault, Place
from tests.engine.power_station import station

STATION = station()


def test_the_same_site_in_two_views() -> None:
    grids = Grids(STATION.plant, Case("iec60909"))
    whole, without = Scene(grids.grid()), Scene(grids.grid(View(motors=False)))
    for key in STATION.at.values():
        place = Place(*key)
        site = whole.site(place)
        assert site == without.site(place)
        more, less = (scene.fault(Fault(place), site) for scene in (whole, without))
        assert more.ik_ka > less.ik_ka > 0
        assert (less.terminal_ka[STATION.ids["M6"], "line"] == 0).all()
        assert less.terminal_ka.keys() == more.terminal_ka.keys()
        np.testing.assert_allclose(more.fault_kv, 0, atol=1e-9)


def test_assumed_data_are_those_of_parts_in_the_view() -> None:
    typical = station(power_factor="")
    grids = Grids(typical.plant, Case("iec60909"))
    # R0/X0 of the supply is typical as well
    assert Scene(grids.grid()).assumed == {0: ("Q", "G")}
