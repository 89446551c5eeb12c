"""Places seen in several grids: many at once as one by one, and against full faults."""

import numpy as np
import pytest

from onelinefault.engine.boundary import boundary_of
from onelinefault.engine.case import Case, View
from onelinefault.engine.grids import Grids
from onelinefault.engine.places import Site
from onelinefault.engine.sight import AT_ONCE, Places, Sight
from onelinefault.engine.study import Study
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.engine.power_station import station
from tests.oracle.sketch import Sketch

STATION = station()
GRIDS = Grids(STATION.plant, Case("iec60909"))


@pytest.mark.parametrize("kind", list(FaultKind))
def test_many_places_are_seen_as_one_by_one(kind: FaultKind) -> None:
    nodes = np.arange(4)
    together = Sight(GRIDS.grid(), Places(nodes, Fault(Place(""), kind)))
    columns = {part.start: z for part, z in together.transfers(nodes)}[0]
    for node in nodes:
        single = Sight(GRIDS.grid(), Places(nodes[node : node + 1], Fault(Place(""), kind)))
        np.testing.assert_allclose(together.z[node], single.z[0], rtol=1e-10)
        np.testing.assert_allclose(together.phases_ka(True)[node], single.phases_ka(True)[0], rtol=1e-10)
        np.testing.assert_allclose(together.ratio[node], single.ratio[0], rtol=1e-10)
        ((_, own),) = single.transfers(nodes)
        np.testing.assert_allclose(columns[node], own[0], rtol=1e-10, atol=1e-15)


def test_fault_impedances_count_and_their_reactances_follow_the_frequency() -> None:
    fault = Fault(Place(*STATION.at["Q"]), zf_ohm=1 + 2j)
    node = GRIDS.grid().network.node_of[STATION.at["Q"]]
    places = Places(np.array([node]), fault)
    base = float(GRIDS.grid().network.base_ohm[node])
    whole, slow = (Sight(GRIDS.grid(view), places) for view in (View(), View(reactance=0.4)))
    assert whole.through[0] * base == pytest.approx(whole.z[0, 0] * base + 1 + 2j, rel=1e-12)
    assert slow.through[0] * base == pytest.approx(slow.z[0, 0] * base + 1 + 0.8j, rel=1e-12)
    wanted = boundary_of(fault, base).solve(np.ones(1), whole.z)[0]
    np.testing.assert_allclose(whole.phases_ka(False)[0, 0], 1.1 * wanted[0, 0] * GRIDS.grid().network.base_ka[node])


def test_sources_are_taken_a_handful_at_a_time() -> None:
    sight = Sight(GRIDS.grid(), Places(np.arange(4), Fault(Place(""))))
    many = np.tile(np.arange(4), 40)
    parts = list(sight.transfers(many))
    assert [z.shape for _, z in parts] == [(4, AT_ONCE), (4, AT_ONCE), (4, 160 - 2 * AT_ONCE)]
    np.testing.assert_allclose(np.concatenate([z for _, z in parts], axis=1)[:, :4], parts[0][1][:, 4:8], rtol=1e-12)


@pytest.mark.parametrize("kind", list(FaultKind))
def test_a_place_that_nothing_feeds_has_no_current(kind: FaultKind) -> None:
    s = Sketch()
    a, b = s.bus(10.0), s.bus(10.0)
    cable = s.hang("cable", a, b, length="1 km", r_per_length="0.1 ohm/km", x_per_length="0.1 ohm/km")
    s.hang("induction_motor", a, rated_power="1 MW", rated_voltage="10 kV")
    grids = Grids(s.plant, Case("iec60909"))
    dead = grids.grid(View(motors=False))
    for site in (Site(0, a), Site(0, None, 0, 0.3)):
        sight = Sight(dead, Places.at(site, Fault(Place(cable, "a", None, 0.3), kind)))
        assert not sight.live[0] and (sight.phases_ka(True) == 0).all() and sight.ratio[0] == 0
        alive = Sight(grids.grid(), Places.at(site, Fault(Place(""), kind)))
        assert alive.live[0] and (kind is not FaultKind.THREE_PHASE or abs(alive.phases_ka(True)).min() > 0)


def test_a_point_along_a_cable_is_seen_as_a_fault_there() -> None:
    s = Sketch()
    a, b = s.bus(10.0), s.bus(10.0)
    s.hang("supply", a, nominal_voltage="10 kV", fault_level_max="100 MVA", x0_over_x1="1")
    cable = s.hang(
        "cable", a, b, length="3 km", r_per_length="0.2 ohm/km", x_per_length="0.1 ohm/km",
        r0_per_length="1 ohm/km", x0_per_length="0.4 ohm/km",
    )  # fmt: skip
    study = Study(s.plant, Case("iec60909"))
    fault = Fault(Place(cable, "a", None, 0.4), FaultKind.LINE_TO_EARTH)
    sight = Sight(study.grids.grid(), Places.at(Site(0, None, 0, 0.4), fault))
    np.testing.assert_allclose(abs(sight.phases_ka(True)[0, 0]), study.fault(fault).ik_ka, rtol=1e-12)
