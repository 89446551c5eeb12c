"""The same network with other resistances or reactances: at an equivalent frequency, or of one kind alone."""

from dataclasses import replace

import numpy as np

from onelinefault.engine.network import ComplexArray, Network

LEFT = 1e-9
"""Share of an impedance's magnitude that stays as a reactance or resistance where a change would leave nothing."""


def reshaped(network: Network, resistance: float, reactance: float) -> Network:
    """The network with every resistance and every reactance times a factor; topology and ratios stay.

    R + jX becomes resistance·R + j·reactance·X in each element by itself, so that 0.4 for the reactances is the network
    at 0.4 times its frequency, and 0 leaves resistances alone. Meant for networks without charging: a capacitance would
    be changed like an inductance. An element of which nothing is left keeps ``LEFT`` of its magnitude.
    """
    if resistance == reactance == 1:
        return network
    y_series, y_from, y_to, y_shunt = (
        _reshaped(y, resistance, reactance) for y in (network.y_series, network.y_from, network.y_to, network.y_shunt)
    )
    return replace(network, y_series=y_series, y_from=y_from, y_to=y_to, y_shunt=y_shunt)


def _reshaped(y: ComplexArray, resistance: float, reactance: float) -> ComplexArray:
    there = y != 0
    z = np.divide(1.0, y, out=np.ones_like(y), where=there)
    changed = resistance * z.real + 1j * reactance * z.imag
    small = abs(changed) < LEFT * abs(z)
    changed = np.where(small, LEFT * abs(z) * (1.0 if reactance == 0 else 1j), changed)
    return np.where(there, 1 / changed, 0.0)
