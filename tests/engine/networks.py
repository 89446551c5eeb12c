"""Networks made by hand for the tests, each node with a bus and wires, and a plain solver in phases to compare with."""

from dataclasses import dataclass, field

import numpy as np

from onelinefault.engine.case import Case
from onelinefault.engine.network import Converter, Joint, Network, NeutralTerm, Node, Source
from onelinefault.engine.study import Study
from onelinefault.model.conductors import Cable
from onelinefault.model.consumers import Bus
from onelinefault.model.fault import FaultKind
from onelinefault.model.plant import Document, Plant
from onelinefault.model.quantity import PER_UNIT, read_quantity
from onelinefault.model.sources import ConverterSource, Supply
from onelinefault.model.switching import Breaker

INF = float("inf")
A = np.exp(2j * np.pi / 3)
F = np.array([[1, 1, 1], [A**2, A, 1], [A, A**2, 1]])


def admittance(z):
    """1/z, 0 for an infinite impedance."""
    return 0.0 if not np.isfinite(z) else 1 / z


@dataclass
class Sketch:
    """Grows node by node; ``study()`` ends it. Impedances per unit on base_mva as (z1, z2, z0), INF for open."""

    base_mva: float = 100.0
    prefault: str = "1.0 pu"
    kv: list = field(default_factory=list)
    turn: list = field(default_factory=list)
    branches: list = field(default_factory=list)
    shunts: list = field(default_factory=list)
    converters: list = field(default_factory=list)
    neutrals: list = field(default_factory=list)
    joints: list = field(default_factory=list)
    parts: dict = field(default_factory=dict)
    terminals: list = field(default_factory=list)

    def node(self, kv=10.0, turn=0.0):
        number = len(self.kv)
        self.kv.append(kv)
        self.turn.append(turn)
        self.parts[f"B{number}"] = Bus(id=f"B{number}", name=f"Bus {number}", length=12)
        self.terminals.append([(f"B{number}", "bar")])
        return number

    def hang(self, node, key):
        """A terminal on a node, wired to its bus."""
        self.terminals[node].append(key)
        self.joints.append(Joint(f"w{len(self.joints)}", True, (f"B{node}", "bar"), key))

    def branch(self, i, j, z, t=(1, 1, 1), y_from=(0, 0, 0), y_to=(0, 0, 0)):
        part = f"W{len(self.branches)}"
        self.parts[part] = Cable(id=part, name=part)
        self.branches.append((i, j, z, t, y_from, y_to, part))
        self.hang(i, (part, "a"))
        self.hang(j, (part, "b"))
        return part

    def source(self, node, z):
        part = f"S{len(self.shunts)}"
        self.parts[part] = Supply(id=part, name=part)
        self.shunts.append((node, z, part, True))
        self.hang(node, (part, "out"))
        return part

    def earthing(self, node, z0):
        """A zero-sequence path to earth that is no source."""
        part = f"S{len(self.shunts)}"
        self.parts[part] = Supply(id=part, name=part)
        self.shunts.append((node, (INF, INF, z0), part, False))
        self.hang(node, (part, "out"))
        return part

    def converter(self, node, limit, angle=90.0):
        part = f"C{len(self.converters)}"
        self.parts[part] = ConverterSource(id=part, name=part)
        self.converters.append(Converter(part, node, limit, angle))
        self.hang(node, (part, "line"))
        return part

    def breaker(self, node, key_a, key_b):
        """A closed breaker inside a node between two terminals that are already there or new."""
        part = f"Q{sum(name.startswith('Q') for name in self.parts)}"
        self.parts[part] = Breaker(id=part, name=part)
        self.terminals[node] += [(part, "a"), (part, "b")]
        self.joints.append(Joint(f"w{len(self.joints)}", True, key_a, (part, "a")))
        self.joints.append(Joint(part, False, (part, "a"), (part, "b")))
        self.joints.append(Joint(f"w{len(self.joints)}", True, (part, "b"), key_b))
        return part

    def network(self):
        n = len(self.kv)
        triple = lambda rows, kind: np.array(rows, kind).reshape(-1, 3)  # noqa: E731
        edges = [(b[0], b[1]) for b in self.branches]
        island = np.arange(n)
        for _ in range(n):
            for i, j in edges:
                island[[i, j]] = min(island[i], island[j])
        feeding = [s[0] for s in self.shunts if s[3]] + [c.node for c in self.converters]
        return Network(
            base_mva=self.base_mva,
            frequency_hz=50.0,
            nodes=tuple(
                Node(f"Bus {k}", kv, tuple(keys), (f"B{k}",))
                for k, (kv, keys) in enumerate(zip(self.kv, self.terminals, strict=True))
            ),
            node_of={key: k for k, keys in enumerate(self.terminals) for key in keys},
            from_node=np.array([b[0] for b in self.branches], np.int64),
            to_node=np.array([b[1] for b in self.branches], np.int64),
            ratio=triple([b[3] for b in self.branches], float),
            y_series=triple([[admittance(z) for z in b[2]] for b in self.branches], complex),
            y_from=triple([b[4] for b in self.branches], complex),
            y_to=triple([b[5] for b in self.branches], complex),
            branch_parts=tuple(b[6] for b in self.branches),
            branch_terminals=tuple(((b[6], "a"), (b[6], "b")) for b in self.branches),
            shunt_node=np.array([s[0] for s in self.shunts], np.int64),
            y_shunt=triple([[admittance(z) for z in s[1]] for s in self.shunts], complex),
            shunt_parts=tuple(s[2] for s in self.shunts),
            shunt_terminals=tuple((s[2], "out") for s in self.shunts),
            sources=tuple(Source(s[2], s[0], k) for k, s in enumerate(self.shunts) if s[3]),
            converters=tuple(self.converters),
            displacement_deg=np.array(self.turn, float),
            island=island,
            live=np.isin(island, island[feeding]),
            joints=tuple(self.joints),
            neutral_terms=tuple(NeutralTerm(*term) for term in self.neutrals),
        )

    def study(self, **case):
        document = Document(prefault_voltage=read_quantity(self.prefault, PER_UNIT))
        return Study(Plant(document, self.parts), Case(**case), self.network())


def phase_block(values, turn):
    """3 × 3 admittance in phases of three sequence admittances whose far side is turned by an angle in degrees."""
    ahead = np.exp(1j * np.deg2rad(turn))
    return F @ np.diag(np.asarray(values) * [ahead, 1 / ahead, 1]) @ np.linalg.inv(F)


def branch_blocks(network, b):
    """((ii, ij), (ji, jj)) of one branch in phases, real phase displacement included."""
    y, t = network.y_series[b], network.ratio[b]
    turn = network.displacement_deg[network.from_node[b]] - network.displacement_deg[network.to_node[b]]
    return (
        (phase_block(y / t**2 + network.y_from[b], 0), phase_block(-y / t, turn)),
        (phase_block(-y / t, -turn), phase_block(y + network.y_to[b], 0)),
    )


def phase_matrix(network):
    """The admittance matrix of all nodes in phases, shape (3n, 3n); not symmetric where phases are turned."""
    n = len(network.nodes)
    Y = np.zeros((n, 3, n, 3), complex)
    for b in range(len(network.from_node)):
        ends = network.from_node[b], network.to_node[b]
        for row, blocks in zip(ends, branch_blocks(network, b), strict=True):
            for column, block in zip(ends, blocks, strict=True):
                Y[row, :, column, :] += block
    for node, y in zip(network.shunt_node, network.y_shunt, strict=True):
        Y[node, :, node, :] += phase_block(y, 0)
    return Y.reshape(3 * n, 3 * n)


def phase_domain_fault(network, before, node, kind, phases="", zf=0, zg=0):
    """Voltages (n, 3) and fault current (3,) per unit: one dense solution of all phases and the fault's equations.

    before (n,): complex phase-a voltages before the fault, in each node's own turned frame.
    """
    n = len(network.nodes)
    Y = phase_matrix(network)
    before_phases = (before[:, None] * [1, A**2, A]).ravel()
    which = ["abc".index(p) for p in phases]
    equations = np.zeros((3, 3 * n + 3), complex)
    V, I = 3 * node, 3 * n  # noqa: E741
    for p in range(3):
        row = equations[p]
        if p not in which:
            row[I + p] = 1
        elif kind in (FaultKind.LINE_TO_EARTH, FaultKind.TWO_LINES_TO_EARTH):
            row[V + p] = 1
            row[I + p] -= zf
            for q in which:
                row[I + q] -= zg
        elif p == which[0]:
            row[[I + q for q in which]] = 1
        elif kind is FaultKind.LINE_TO_LINE:
            row[[V + p, V + which[0], I + p]] = 1, -1, -zf
        else:
            row[[V + p, V + which[0], I + p, I + which[0]]] = 1, -1, -zf, zf
    taken = np.zeros((3 * n, 3))
    taken[V : V + 3] = np.eye(3)
    matrix = np.vstack((np.hstack((Y, taken)), equations))
    known = np.concatenate((Y @ before_phases, np.zeros(3)))
    solution = np.linalg.lstsq(matrix, known, rcond=1e-13)[0]
    return solution[: 3 * n].reshape(n, 3), solution[3 * n :]


def random_sketch(rng, charging=False, prefault="1.0 pu", open_loops=False):
    """A small plant-like network: voltage levels with consistent ratios, turned phases, ties, open zero sequences.

    open_loops: zero-sequence signs that contradict each other round a loop (clock 0 in parallel with clock 6).
    """
    s = Sketch(prefault=prefault)
    n = int(rng.integers(2, 8))
    level, sign = rng.choice([1.0, 1.0, 1.05, 0.96], n), rng.choice([1, 1, -1], n)
    for _ in range(n):
        s.node(float(rng.choice([0.4, 6.0, 10.0, 110.0])), float(rng.integers(12) * 30))

    def z(scale=1.0):
        return scale * complex(rng.uniform(0.001, 0.3), rng.uniform(0.02, 0.5))

    def triple(open_share):
        z1 = z()
        return z1, z1 * rng.uniform(0.8, 1.2), INF if rng.random() < open_share else z(2)

    def shunt():
        return tuple(1j * rng.uniform(0.001, 0.05, 3)) if charging and rng.random() < 0.5 else (0, 0, 0)

    edges = [(k, int(rng.integers(k))) for k in range(1, n)]
    edges += [tuple(rng.permutation(n)[:2].tolist()) for _ in range(int(rng.integers(0, 3)))]
    for i, j in edges:
        t = level[i] / level[j]
        t0 = t * (rng.choice([1, -1]) if open_loops else sign[i] * sign[j])
        s.branch(i, j, triple(0.4), t=(t, t, t0), y_from=shunt(),
                 y_to=shunt())  # fmt: skip
    for node in {0, *rng.integers(0, n, 2).tolist()}:
        s.source(int(node), triple(0.4))
    if rng.random() < 0.5:
        s.earthing(int(rng.integers(n)), z(3))
    return s


def turned_voltages(study, node):
    """Prefault voltages (n,) per unit as seen from a node, in the real turned frames of all nodes."""
    displacement = study.network.displacement_deg
    return study.prefault.everywhere(node) * np.exp(1j * np.deg2rad(displacement - displacement[node]))
