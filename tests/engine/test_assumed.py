from dataclasses import replace

from onelinefault.engine.assumed import assumed_names, rests_on_assumptions
from onelinefault.model.conductors import Cable, Reactor
from onelinefault.model.fields import Basis
from onelinefault.model.plant import Plant
from onelinefault.model.sources import Supply
from onelinefault.model.transforming import Transformer
from tests.engine.networks import Sketch


def test_marked_ratings_count_while_they_are_in_use() -> None:
    cable = Cable(id="p1").with_text("r_per_length", "0.1 ohm/km", Basis.TYPICAL)
    assert rests_on_assumptions(cable)
    assert rests_on_assumptions(cable.with_text("r_per_length", "0.1 ohm/km", Basis.GUESSED))
    assert not rests_on_assumptions(cable.with_text("r_per_length", "0.1 ohm/km", Basis.MEASURED))
    assert not rests_on_assumptions(replace(cable, r_per_length=None))


def test_defaults_that_stand_for_nameplate_values_count_and_others_do_not() -> None:
    assert rests_on_assumptions(Reactor(id="p1"))  # X/R 80
    assert not rests_on_assumptions(Reactor(id="p1").with_text("x_over_r", "60"))
    assert not rests_on_assumptions(Cable(id="p1"))  # one in parallel, copper, 20 °C are no assumptions
    known = Transformer(id="p1").with_text("vector_group", "Dyn11").with_text("neutral_low", "solid")
    assert not rests_on_assumptions(known)  # tap 0 % is no assumption either


def test_names_by_island_in_the_plants_order_and_only_of_parts_in_the_network() -> None:
    s = Sketch()
    a, b, c = s.node(), s.node(), s.node()
    s.branch(a, b, (0.1j,) * 3)
    first, second, third = s.source(b, (0.1j,) * 3), s.source(a, (0.1j,) * 3), s.source(c, (0.1j,) * 3)
    known = Supply(id=third).with_text("x_over_r", "12").with_text("r0_over_x0", "0.1")
    parts = {**s.parts, third: known, "spare": Supply(id="spare", name="Spare")}
    parts[second] = replace(parts[second], name="")
    assert assumed_names(Plant(parts=parts), s.network()) == {0: (first, second)}
