"""A small invented plant for drawing tests, built with the same edits as the desk uses."""

from onelinefault.model.editing import connect, insert_into_wire, place
from onelinefault.model.edits import Edit, apply
from onelinefault.model.plant import End, Plant


class Desk:
    """Applies edits one after another and gives the id of what an edit placed."""

    def __init__(self) -> None:
        self.plant = Plant()

    def do(self, edit: Edit) -> str:
        known = self.plant.parts.keys() | self.plant.wires.keys()
        self.plant = apply(self.plant, edit)
        fresh = [k for k in (*edit.parts, *edit.wires) if k not in known]
        return fresh[0] if fresh else ""

    def put(self, kind: str, x: int, y: int, **presets: object) -> str:
        return self.do(place(self.plant, kind, "s1", x, y, **presets))

    def join(self, a: End, b: End) -> str:
        return self.do(connect(self.plant, a, b))


def pump_house() -> tuple[Plant, dict[str, str]]:
    """Supply, transformer with a breaker, board, generator and motors; ids by name."""
    desk = Desk()
    ids = {
        "grid": desk.put(
            "supply", 30, 8, name="Grid", nominal_voltage="33 kV", fault_level_max="900 MVA", x_over_r="12"
        ),
        "intake": desk.put("bus", 16, 14, name="Intake", nominal_voltage="33 kV", length=60),
        "t1": desk.put(
            "transformer", 30, 22, name="T1", rated_power="20 MVA", high_voltage="33 kV", low_voltage="11.5 kV",
            impedance="10 %", x_over_r="22", vector_group="Dyn11", neutral_low="resistor 400 A 10 s",
        ),
        "board": desk.put("bus", 16, 34, name="Board A", nominal_voltage="11 kV", length=36),
        "g1": desk.put(
            "synchronous_generator", 20, 46, name="G1", rated_power="7.5 MVA", rated_voltage="11 kV",
            subtransient_reactance="14 %",
        ),
        "w1": desk.put(
            "cable", 40, 42, name="W1", length="180 m", r_per_length="0.1 ohm/km", x_per_length="0.1 ohm/km"
        ),
        "m1": desk.put(
            "induction_motor", 44, 54, name="Pumps", count="3", rated_power="1.2 MW", rated_voltage="11 kV",
            x_over_r="10",
        ),
    }  # fmt: skip
    desk.join(End(ids["grid"], "out"), End(ids["intake"], "bar"))
    desk.join(End(ids["intake"], "bar"), End(ids["t1"], "high"))
    ids["below"] = desk.join(End(ids["t1"], "low"), End(ids["board"], "bar"))
    known = set(desk.plant.parts)
    desk.do(insert_into_wire(desk.plant, ids["below"], "breaker", 30, 30, name="Q1"))
    ids["q1"] = next(k for k in desk.plant.parts if k not in known)
    desk.join(End(ids["board"], "bar"), End(ids["g1"], "line"))
    desk.join(End(ids["board"], "bar"), End(ids["w1"], "a"))
    ids["to_pumps"] = desk.join(End(ids["w1"], "b"), End(ids["m1"], "line"))
    return desk.plant, ids
