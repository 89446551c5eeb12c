import pytest

from onelinefault.engine.places import place_named, site_of
from onelinefault.errors import NoSuchPlaceError
from onelinefault.model.conductors import Cable
from onelinefault.model.consumers import Bus, Note
from onelinefault.model.fault import Place
from onelinefault.model.plant import Plant
from onelinefault.model.transforming import Transformer
from tests.engine.networks import INF, Sketch

PLANT = Plant(
    parts={
        "p1": Transformer(id="p1", name="T1"),
        "p2": Bus(id="p2", name="Board A 0.4 kV"),
        "p3": Bus(id="p3", name="T1"),
        "p4": Transformer(id="p4", name="T 2.1"),
        "p5": Cable(id="p5"),
        "p6": Note(id="p6", name="Remark"),
    }
)


@pytest.mark.parametrize(
    "name,place",
    [
        ("Board A 0.4 kV", Place("p2")),
        ("  board a 0.4 KV ", Place("p2")),
        ("T1", Place("p3")),  # a bus goes before a transformer of the same name
        ("T 2.1", Place("p4", "high")),
        ("T 2.1 low", Place("p4", "low")),
        ("T 2.1.low", Place("p4", "low")),
        ("p5", Place("p5", "a")),
        ("p5.b", Place("p5", "b")),
    ],
)
def test_names_mean_places(name: str, place: Place) -> None:
    assert place_named(PLANT, name) == place


def test_a_wrong_name_is_answered_with_near_ones() -> None:
    with pytest.raises(NoSuchPlaceError, match=r"'Bord A 0.4 kV'.*near it: Board A 0.4 kV"):
        place_named(PLANT, "Bord A 0.4 kV")


@pytest.mark.parametrize("name", ["zzzzz", "", "T 2.1 middle", "Remark", "p9"])
def test_nothing_near_lists_the_buses(name: str) -> None:
    with pytest.raises(NoSuchPlaceError, match=r"nothing called"):
        place_named(PLANT, name)
    with pytest.raises(NoSuchPlaceError, match="no bus yet"):
        place_named(Plant(), "anything")


def line() -> tuple[Plant, Sketch]:
    s = Sketch()
    a, b = s.node(), s.node()
    s.source(a, (0.1j,) * 3)
    s.branch(a, b, (0.1j,) * 3)
    s.parts["T"] = Transformer(id="T", name="T7")
    s.parts["out"] = Bus(id="out", in_service=False)
    s.parts["short"] = Cable(id="short")
    return Plant(parts=s.parts), s


def site(place: Place):
    plant, s = line()
    return site_of(plant, s.network(), {"W0": 0}, place)


def test_terminals_and_fractions_lead_to_nodes_and_branches() -> None:
    assert (site(Place("B1")).node, site(Place("B1")).terminal) == (1, ("B1", "bar"))
    assert site(Place("W0", "b")).node == 1
    near, far = site(Place("W0", fraction=0.4)), site(Place("W0", fraction=0.6))
    assert (near.branch, near.fraction, near.node) == (0, 0.4, 0)
    assert (far.branch, far.fraction, far.node) == (0, 0.6, 1)
    assert site(Place("W0", fraction=0.0)).terminal == ("W0", "a")
    assert site(Place("W0", fraction=1.0)).terminal == ("W0", "b")


def test_a_branch_that_starts_at_terminal_b_counts_from_there() -> None:
    plant, s = line()
    s.branches[0] = (1, 0, (0.1j, 0.1j, INF), *s.branches[0][3:])
    network = s.network()
    object.__setattr__(network, "branch_terminals", ((("W0", "b"), ("W0", "a")),))
    found = site_of(plant, network, {"W0": 0}, Place("W0", fraction=0.25))
    assert (found.branch, found.fraction, found.node) == (0, 0.75, 0)


@pytest.mark.parametrize(
    "place,message",
    [
        (Place("nowhere"), "no part 'nowhere'"),
        (Place("B0", "top"), "Bus Bus 0 has no terminal 'top'; it has bar"),
        (Place("out"), "Bus out is out of service"),
        (Place("W0", fraction=1.2), "cable W0 cannot be at 1.2 .* from 0 to 1"),
        (Place("T", fraction=0.5), "part of the way along transformer T7"),
        (Place("short", fraction=0.5), "Cable short is not in the network"),
        (Place("short", "a"), "Cable short is not in the network"),
    ],
)
def test_places_that_are_not_there(place: Place, message: str) -> None:
    with pytest.raises(NoSuchPlaceError, match=message):
        site(place)
