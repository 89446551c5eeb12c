import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.engine.boundary import boundary_of
from onelinefault.engine.symmetrical import to_phases
from onelinefault.errors import StudyError
from onelinefault.model.fault import PHASE_CHOICES, Fault, FaultKind, Place

THREE, LINES, EARTHED_LINES, EARTH = FaultKind
INF = complex(np.inf)
Z = np.array([0.02 + 0.21j, 0.03 + 0.17j, 0.05 + 0.4j])
ZF, ZG = 0.07 + 0.01j, 0.03 + 0.02j


def solve(kind, z, phases="", zf=0j, zg=0j, emf=1.0):
    return boundary_of(Fault(Place("B"), kind, phases, zf, zg)).solve(np.array(emf, complex), np.array(z))


def beside(one, other):
    return one * other / (one + other)


@pytest.mark.parametrize("zf,zg", [(0j, 0j), (ZF, 0j), (0j, ZG), (ZF, ZG)])
def test_closed_forms_of_the_four_kinds(zf: complex, zg: complex) -> None:
    """Positive-sequence current of each kind (Anderson 1973, chapter 3; the conventions for Zf and Zg are the
    design's)."""
    z1, z2, z0 = Z
    expected = {
        THREE: 1 / (z1 + zf),
        LINES: 1 / (z1 + z2 + zf),
        EARTHED_LINES: 1 / (z1 + zf + beside(z2 + zf, z0 + zf + 3 * zg)),
        EARTH: 1 / (z1 + z2 + z0 + 3 * (zf + zg)),
    }
    for kind, current in expected.items():
        assert solve(kind, Z, zf=zf, zg=zg)[0][0] == pytest.approx(current, rel=1e-13)


def test_negative_and_zero_sequence_of_the_closed_forms() -> None:
    z1, z2, z0 = Z
    assert np.allclose(solve(LINES, Z)[0], np.array([1, -1, 0]) / (z1 + z2), atol=1e-13)
    assert np.allclose(solve(EARTH, Z)[0], np.ones(3) / (z1 + z2 + z0), atol=1e-13)
    first = 1 / (z1 + beside(z2, z0))
    assert np.allclose(
        solve(EARTHED_LINES, Z)[0], [first, -first * z0 / (z2 + z0), -first * z2 / (z2 + z0)], atol=1e-13
    )


@pytest.mark.parametrize("kind,phases", [(k, p) for k in FaultKind for p in PHASE_CHOICES[k]])
def test_the_solution_meets_the_fault_in_phases(kind: FaultKind, phases: str) -> None:
    """Ohm's law at the fault itself, written phase by phase, and the network's Thévenin equations."""
    current, voltage = solve(kind, Z, phases, ZF, ZG)
    assert np.allclose(voltage, np.array([1, 0, 0]) - Z * current, atol=1e-14)
    I, V = to_phases(current), to_phases(voltage)  # noqa: E741
    inside = ["abc".index(p) for p in phases]
    outside = [p for p in range(3) if p not in inside]
    assert np.allclose(I[outside], 0, atol=1e-13)
    if kind in (EARTH, EARTHED_LINES):
        assert np.allclose(V[inside], ZF * I[inside] + ZG * I.sum(), atol=1e-13)
    else:
        assert abs(I.sum()) < 1e-13
        across = ZF if kind is LINES else 2 * ZF  # between the two lines once, between two lines of three twice
        p, q = inside[:2]
        assert V[p] - V[q] == pytest.approx(across * (I[p] - I[q]) / 2, abs=1e-13)


@pytest.mark.parametrize("kind", [EARTH, LINES, EARTHED_LINES])
def test_other_phases_are_the_usual_ones_rolled(kind: FaultKind) -> None:
    """b-E is a-E rolled by one phase, and so on: the network is the same for all phases."""
    usual = PHASE_CHOICES[kind][0]
    rolled = "".join("abc"["abc".index(p) - 2] for p in usual)
    turn = np.exp(-2j * np.pi / 3)  # the rolled phase's voltage is a² times that of phase a
    first, second = to_phases(solve(kind, Z, usual, ZF, ZG)[0]), to_phases(solve(kind, Z, rolled, ZF, ZG)[0])
    assert np.allclose(second, np.roll(first, 1) * turn, atol=1e-13)


def test_line_to_line_is_root_three_halves_of_three_phase_where_z2_is_z1() -> None:
    z = [Z[0], Z[0], Z[2]]
    three, lines = (abs(to_phases(solve(kind, z)[0])).max() for kind in (THREE, LINES))
    assert lines / three == pytest.approx(np.sqrt(3) / 2, rel=1e-14)


def test_two_lines_to_earth_follows_from_the_other_kinds() -> None:
    """The residual current 3 I0 = −3 V Z2/(Z1 Z2 + Z2 Z0 + Z0 Z1), each Z from one of the other kinds' currents."""
    z1 = 1 / solve(THREE, Z)[0][0]
    z2 = 1 / solve(LINES, Z)[0][0] - z1
    z0 = 1 / solve(EARTH, Z)[0][0] - z1 - z2
    assert solve(EARTHED_LINES, Z)[0][2] == pytest.approx(-z2 / (z1 * z2 + z2 * z0 + z0 * z1), rel=1e-12)


def test_without_a_path_to_earth_one_line_carries_nothing_and_the_others_rise() -> None:
    current, voltage = solve(EARTH, [*Z[:2], INF])
    assert np.all(current == 0)
    assert np.allclose(abs(to_phases(voltage)), [0, np.sqrt(3), np.sqrt(3)], atol=1e-14)


def test_without_a_path_to_earth_two_lines_to_earth_are_line_to_line() -> None:
    open_zero = [*Z[:2], INF]
    assert np.allclose(solve(EARTHED_LINES, open_zero)[0], solve(LINES, open_zero)[0], atol=1e-13)
    assert np.allclose(to_phases(solve(EARTHED_LINES, open_zero)[1])[1:], 0, atol=1e-13)


def test_faults_clear_of_earth_do_not_move_the_neutral() -> None:
    for kind in (THREE, LINES):
        for zero in (Z[2], INF, 0j):
            current, voltage = solve(kind, [*Z[:2], zero])
            assert current[2] == 0 and voltage[2] == 0


def test_many_places_at_once_are_as_each_alone() -> None:
    rng = np.random.default_rng(5)
    z = rng.uniform(0.01, 1, (20, 3)) + 1j * rng.uniform(0.01, 1, (20, 3))
    z[::4, 2] = np.inf
    emf, base = rng.uniform(0.9, 1.1, 20).astype(complex), rng.uniform(0.1, 10, 20)
    for kind in FaultKind:
        fault = Fault(Place("B"), kind, "", ZF, ZG)
        current, voltage = boundary_of(fault, base).solve(emf, z)
        for k in range(20):
            alone = boundary_of(fault, float(base[k])).solve(emf[k], z[k])
            assert np.allclose(current[k], alone[0], rtol=1e-13) and np.allclose(voltage[k], alone[1], rtol=1e-13)


part = st.floats(1e-6, 1e3)


@settings(max_examples=60, deadline=None)
@given(st.tuples(*[part] * 6), st.sampled_from(list(FaultKind)), part)
def test_currents_do_not_depend_on_the_unit_of_impedance(
    parts: tuple[float, ...], kind: FaultKind, unit: float
) -> None:
    z = np.array(parts[:3]) + 1j * np.array(parts[3:])
    current = solve(kind, z, zf=ZF, zg=ZG)[0]
    scaled = solve(kind, z * unit, zf=ZF * unit, zg=ZG * unit)[0] * unit
    assert np.allclose(scaled, current, rtol=1e-11, atol=1e-11 * abs(current).max())


@pytest.mark.parametrize("kind,phases", [(EARTH, "ab"), (LINES, "a"), (LINES, "bb"), (THREE, "ab"), (EARTH, "x")])
def test_phases_that_do_not_fit_are_refused_with_what_would(kind: FaultKind, phases: str) -> None:
    with pytest.raises(StudyError, match=rf"{kind.value}.*'{phases}'.*letters a, b, c"):
        boundary_of(Fault(Place("B"), kind, phases))


def test_an_impedance_that_is_no_number_is_refused() -> None:
    with pytest.raises(StudyError, match="finite number of ohm"):
        boundary_of(Fault(Place("B"), EARTH, zf_ohm=complex("nan")))
