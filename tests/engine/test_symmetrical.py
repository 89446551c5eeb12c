import numpy as np

from onelinefault.engine.symmetrical import to_phases, to_sequences, turns

A = np.exp(2j * np.pi / 3)


def test_each_sequence_gives_its_own_order_of_phases() -> None:
    """Fortescue 1918: positive a-b-c, negative a-c-b, zero all alike."""
    assert np.allclose(to_phases(np.array([1, 0, 0j])), [1, A**2, A], atol=1e-15)
    assert np.allclose(to_phases(np.array([0, 1, 0j])), [1, A, A**2], atol=1e-15)
    assert np.allclose(to_phases(np.array([0, 0, 1j])), [1j, 1j, 1j], atol=1e-15)


def test_one_phase_alone_is_a_third_of_each_sequence() -> None:
    assert np.allclose(to_sequences(np.array([3, 0, 0j])), [1, 1, 1], atol=1e-15)


def test_phases_and_sequences_are_inverse_to_each_other() -> None:
    phases = np.random.default_rng(1).normal(size=(4, 5, 6)).view(np.complex128)
    assert np.allclose(to_phases(to_sequences(phases)), phases, atol=1e-15)


def test_a_delta_star_transformer_of_clock_11_makes_one_one_zero_of_one_phase() -> None:
    """Dyn11: the low side leads by 30°, so a current in phase a of the star flows in A and back in B of the delta, C
    has none, and the line current is √3 times the per-unit sequence current (Anderson 1973; IEC 60076-1 figure
    D.1)."""
    on_star_side = np.array([1, 1, 0j])
    on_delta_side = to_phases(on_star_side * turns(np.array(-30.0)))
    assert np.allclose(on_delta_side, [np.sqrt(3), -np.sqrt(3), 0], atol=1e-15)


def test_the_sequences_turn_in_opposite_directions_and_zero_stays() -> None:
    assert np.allclose(turns(np.array([90.0, 180.0])), [[1j, -1j, 1], [-1, -1, 1]], atol=1e-15)
