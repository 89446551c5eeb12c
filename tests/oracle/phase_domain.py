"""A plant's short circuit solved with conductors a, b, c, star points and windings: the oracle of the engine's tests.

No symmetrical components of the network, no per unit, no phase displacement by formula. Sources are electromotive
forces behind 3×3 impedances; transformers are windings on limbs; the fault is a branch. Superposition as agreed for
the program: before the fault no current flows, the faulted node has its nominal voltage times a factor, all others
follow through the ratios; the fault's currents are those of the network with the sources' emf short-circuited.

In the no-load way every supply and generator has its own emf and the fault is a passive branch: no superposition.

Potentials that no equation fixes (a network nowhere earthed, not faulted to earth) are settled by the convention that
the sum of the three phase voltages is zero.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from onelinefault.engine.case import Case
from onelinefault.model.conductors import Reactor
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant
from onelinefault.model.sources import InductionMotor, Supply, SynchronousGenerator, SynchronousMotor
from onelinefault.model.transforming import Autotransformer, EarthingTransformer, Transformer, Transformer3
from onelinefault.model.values import Neutral
from tests.oracle import ohms, windings
from tests.oracle.circuit import Circuit, Coil, ComplexArray, Pin
from tests.oracle.wiring import Length, TerminalKey, Wiring

MACHINES = (Supply, SynchronousGenerator, SynchronousMotor, InductionMotor)
MOTORS = (SynchronousMotor, InductionMotor)


@dataclass(frozen=True)
class Answer:
    """Everything in kV and kA. terminal_ka: from the node into the part. earth_ka: into the earth at a star point."""

    fault_ka: ComplexArray
    fault_kv: ComplexArray
    before_kv: Mapping[TerminalKey, ComplexArray]
    voltage_kv: Mapping[TerminalKey, ComplexArray]
    terminal_ka: Mapping[TerminalKey, ComplexArray]
    earth_ka: Mapping[TerminalKey, complex]


class _Build:
    """One circuit under construction: shared node pins, and each part's own terminal pins."""

    def __init__(self, wiring: Wiring, case: Case, split: tuple[str, float] | None, sources: "_Sources") -> None:
        self.circuit = Circuit()
        self.wiring, self.case, self.split, self.sources = wiring, case, split, sources
        self.frequency_hz = wiring.plant.document.frequency_hz
        self.nodes: dict[TerminalKey, list[Pin]] = {}
        self.middle: list[Pin] = self.circuit.pins() if split else []
        self.terminals: dict[TerminalKey, list[Pin]] = {}
        self.earths: dict[TerminalKey, Pin] = {}

    def node(self, key: TerminalKey) -> list[Pin]:
        root = self.wiring.node(key)
        if root not in self.nodes:
            self.nodes[root] = self.circuit.pins()
        return self.nodes[root]

    def place(self, key: TerminalKey) -> list[Pin]:
        """Where the fault is: the point along a split line, or the node of a terminal."""
        return self.middle or self.node(key)

    def sums(self) -> ComplexArray:
        """Rows that add the three potentials of every node."""
        threes = [*self.nodes.values(), *([self.middle] if self.middle else [])]
        rows = np.zeros((len(threes), self.circuit.size), dtype=complex)
        for row, three in zip(rows, threes, strict=True):
            for pin in three:
                row[pin.node] = 1.0
        return rows

    def ends(self, part: Part) -> dict[str, list[Pin]]:
        """The part's terminals, each with ledgers of its own."""
        for terminal in part.terminals:
            self.terminals[part.id, terminal.name] = [pin.twin() for pin in self.node((part.id, terminal.name))]
        return {t.name: self.terminals[part.id, t.name] for t in part.terminals}

    def add(self, part: Part) -> None:
        """Put a part into the circuit."""
        if isinstance(part, MACHINES):
            if part.id in self.sources:
                self._machine(part, self.sources[part.id])
        elif isinstance(part, Transformer):
            ends = self.ends(part)
            self._earthed(part, windings.transformer(self.circuit, part, ends["high"], ends["low"]))
        elif isinstance(part, Transformer3):
            self._earthed(part, windings.transformer3(self.circuit, part, self.ends(part)))
        elif isinstance(part, Autotransformer):
            self._earthed(part, windings.autotransformer(self.circuit, part, self.ends(part)))
        elif isinstance(part, EarthingTransformer):
            self._earthed(part, windings.earthing_transformer(self.circuit, part, self.ends(part)["line"]))
        elif isinstance(part, Reactor):
            ends = self.ends(part)
            z = ohms.reactor(part, self.wiring.nominal_kv((part.id, "a")))
            self._series(ends["a"], ends["b"], z)
        elif isinstance(part, Length):
            self._length(part, charged=bool(self.sources))
        else:
            raise AssertionError(f"the oracle does not know {part.title}")

    def _earthed(self, part: Part, earths: windings.EarthPins) -> None:
        self.earths.update({(part.id, side): pin for side, pin in earths.items()})

    def _series(self, a: list[Pin], b: list[Pin], z: tuple[complex, complex, complex]) -> None:
        self.circuit.coils([Coil(a[k], b[k]) for k in range(3)], ohms.phase_matrix(*z))

    def _length(self, part: Length, charged: bool) -> None:
        """The whole length, or two pieces with the fault between, each with half its capacitance at either end."""
        ends, z = self.ends(part), ohms.length(part, self.case)
        pieces = [(1.0, ends["a"], ends["b"])]
        if self.split and self.split[0] == part.id:
            share = self.split[1]
            pieces = [(share, ends["a"], self.middle), (1 - share, self.middle, ends["b"])]
        for share, a, b in pieces:
            self._series(a, b, (share * z[0], share * z[1], share * z[2]))
            if charged and self.case.charging and share > 0:
                for end in (a, b):
                    self._charging(end, *(share * c / 2 for c in ohms.capacitance_uf(part)))

    def _charging(self, end: list[Pin], c1_uf: float, c0_uf: float) -> None:
        """Half the line's capacitance: each phase to earth, and between phases what the screen leaves."""
        omega = 2 * np.pi * self.frequency_hz * 1e-6
        for k in range(3):
            if c0_uf > 0:
                self.circuit.coil(end[k], Pin(None), 1 / (1j * omega * c0_uf))
            if abs(c1_uf - c0_uf) > 1e-9 * c1_uf:
                self.circuit.coil(end[k], end[(k + 1) % 3], 3 / (1j * omega * (c1_uf - c0_uf)))

    def _machine(self, part: Part, emf_kv: ComplexArray) -> None:
        """Coils in star with the star point's earthing, or in delta, each with its part of the emf."""
        if isinstance(part, Supply):
            star = self.circuit.pin() if part.value("star_point") == "isolated" else Pin(None)
            self._star(self.ends(part)["out"], star, ohms.phase_matrix(*ohms.supply(part, self.case)), emf_kv)
            return
        assert isinstance(part, SynchronousGenerator | SynchronousMotor | InductionMotor)
        if isinstance(part, InductionMotor):
            found = ohms.induction(part, self.case)
        else:
            found = ohms.synchronous(part, self.case, self.frequency_hz)
        if found is None or (isinstance(part, MOTORS) and not self.case.motors):
            return
        line, matrix = self.ends(part)["line"], ohms.phase_matrix(*found)
        if part.value("connection") == "delta":
            coils = [Coil(line[k], line[(k + 1) % 3], emf_kv=emf_kv[k] - emf_kv[(k + 1) % 3]) for k in range(3)]
            self.circuit.coils(coils, 3 * matrix)
            return
        neutral = part.value("neutral")
        assert isinstance(neutral, Neutral)
        kv, equal = ohms.number(part, "rated_voltage", "kV"), 1.0
        if isinstance(part, InductionMotor):
            equal = ohms.running(part)
        star, earth = windings.star_point(self.circuit, neutral, True, kv, equal)
        if earth is not None:
            self.earths[part.id, "line"] = earth
        self._star(line, star, matrix, emf_kv)

    def _star(self, line: list[Pin], star: Pin, matrix: ComplexArray, emf_kv: ComplexArray) -> None:
        self.circuit.coils([Coil(line[k], star, emf_kv=complex(emf_kv[k])) for k in range(3)], matrix)

    def solved(self) -> ComplexArray:
        """Potentials and currents, potentials that are open settled by convention."""
        return self.circuit.solve().settled(self.sums())


_Sources = Mapping[str, ComplexArray]  # part → emf of its phases; machines that are not there do not feed


class Oracle:
    """A completed plant in a case, ready for faults. Nodes that no branch joins to the fault are left out."""

    def __init__(self, plant: Plant, case: Case) -> None:
        self.wiring, self.case = Wiring(plant), case
        self._tasks: dict[Place, _Task] = {}

    def fault(self, fault: Fault) -> Answer:
        """The short circuit, solved in phases."""
        if fault.place not in self._tasks:
            self._tasks[fault.place] = _Task.of(self.wiring, self.case, fault.place)
        task = self._tasks[fault.place]
        if self.case.prefault == "nominal":
            build = task.without_current.build
            machines = {part.id: np.zeros(3, dtype=complex) for part in task.parts if isinstance(part, MACHINES)}
            emf_kv = _potentials(task.without_current.x, build.place(task.start))
            return _answer(task, task.without_current, machines, fault, emf_kv)
        before, sources = task.unloaded
        return _answer(task, before, sources, fault, np.zeros(3, dtype=complex))


def _answer(task: "_Task", before: "_Before", sources: _Sources, fault: Fault, emf_kv: ComplexArray) -> Answer:
    """Solve with the fault. emf_kv: of the fault branches, zero where the sources have their own."""
    build = task.built(sources)
    pins = build.place(task.start)
    out = _fault_branches(build.circuit, fault, pins, emf_kv)
    x = build.solved()
    keys = task.wiring.terminals_of(set(build.nodes))
    was = {key: _potentials(before.x, before.build.node(key)) for key in keys}
    at_fault = _potentials(before.x, before.build.place(task.start))
    turn = abs(at_fault[0]) / at_fault[0]  # the agreed reference: phase a at the fault, before it
    added = 1.0 if np.any(emf_kv) else 0.0  # superposition: what the fault changes comes on top
    return Answer(
        fault_ka=turn * np.array([_current(x, pin) for pin in out]),
        fault_kv=turn * (added * at_fault + _potentials(x, pins)),
        before_kv={key: turn * volts for key, volts in was.items()},
        voltage_kv={key: turn * (added * was[key] + _potentials(x, build.node(key))) for key in keys},
        terminal_ka={key: turn * np.array([_current(x, pin) for pin in pins]) for key, pins in build.terminals.items()},
        earth_ka={key: turn * _current(x, pin) for key, pin in build.earths.items()},
    )


@dataclass(frozen=True)
class _Before:
    """The plant before the fault, solved."""

    x: ComplexArray
    build: _Build


class _Task:
    """One plant, one case, one place of the fault."""

    def __init__(self, wiring: Wiring, case: Case, split: tuple[str, float] | None, start: TerminalKey) -> None:
        self.wiring, self.case, self.split, self.start = wiring, case, split, start
        self.parts = wiring.reached_from(start)
        self.factor = wiring.plant.document.prefault_pu

    @classmethod
    def of(cls, wiring: Wiring, case: Case, place: Place) -> "_Task":
        """For a fault's place. At a line's very end the fault is outside the line's terminal."""
        split = (place.part, place.fraction) if place.fraction is not None and 0 < place.fraction < 1 else None
        end = {None: place.terminal, 0.0: "a", 1.0: "b"}.get(place.fraction, "a")
        return cls(wiring, case, split, (place.part, end))

    def built(self, sources: _Sources) -> _Build:
        """The circuit of everything the fault's node hangs together with."""
        build = _Build(self.wiring, self.case, self.split, sources)
        for part in self.parts:
            for terminal in part.terminals:
                build.node((part.id, terminal.name))
        for part in self.parts:
            build.add(part)
        return build

    @cached_property
    def without_current(self) -> _Before:
        """Potentials without any current: a balanced emf at the fault's place, every other source taken away."""
        build = self.built({})
        kv = self.wiring.nominal_kv(self.start) * self.factor / np.sqrt(3)
        for k, pin in enumerate(build.place(self.start)):
            build.circuit.coil(pin, Pin(None), 0j, kv * ohms.A120 ** (-k))
        return _Before(build.solved(), build)

    @cached_property
    def unloaded(self) -> tuple[_Before, _Sources]:
        """The plant with its sources' emf and no motors, and the emf of all: a motor's is the voltage it found.

        An emf has the node's nominal voltage times the factor, at the angle that the windings give it.
        """
        machines = [part for part in self.parts if isinstance(part, MACHINES)]
        driving = [part for part in machines if not isinstance(part, MOTORS)] or machines
        emf = {part.id: self._emf(part, self.without_current) for part in driving}
        whole = _Task(self.wiring, self.case, None, self.start).built(emf)  # the line is cut only by the fault
        x = whole.solved()
        found = {part.id: _potentials(x, whole.node((part.id, part.terminals[0].name))) for part in machines}
        build = self.built(found | emf)
        return _Before(build.solved(), build), found | emf

    def _emf(self, part: Part, ideal: _Before) -> ComplexArray:
        key = (part.id, part.terminals[0].name)
        volts = _potentials(ideal.x, ideal.build.node(key))
        emf: ComplexArray = volts / abs(volts) * self.wiring.nominal_kv(key) * self.factor / np.sqrt(3)
        return emf


def _fault_branches(circuit: Circuit, fault: Fault, pins: list[Pin], before_kv: ComplexArray) -> list[Pin]:
    """The fault as branches with its Thévenin emf. Returns, per phase, pins that know the current into the fault."""
    hit = ["abc".index(letter) for letter in fault.faulted_phases]
    own = [pin.twin() for pin in pins]
    if fault.kind is FaultKind.LINE_TO_LINE:
        k, m = hit
        circuit.coil(own[k], own[m], fault.zf_ohm, complex(before_kv[m] - before_kv[k]))
        return own
    common = circuit.pin()
    for k in hit:
        circuit.coil(own[k], common, fault.zf_ohm, complex(-before_kv[k]))
    circuit.coil(common, Pin(None), fault.zg_ohm)
    return own


def _potentials(x: ComplexArray, pins: list[Pin]) -> ComplexArray:
    return np.array([0j if pin.node is None else x[pin.node] for pin in pins])


def _current(x: ComplexArray, pin: Pin) -> complex:
    return complex(sum(sign * x[column] for column, sign in pin.ledger))
