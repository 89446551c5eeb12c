"""Asymmetrical r.m.s. current: the symmetrical current together with its direct-current part.

A fault at voltage zero starts with the largest direct current, √2·I, which decays with the time constant X/(ωR). The
r.m.s. value of both parts at a moment, the direct part taken as constant over the cycle around it::

    I_asym(τ) = I · sqrt(1 + 2·exp(−4π·τ / (X/R)))          τ: cycles after the start of the fault

Source: series R-L circuit; J. D. Glover and M. S. Sarma, Power System Analysis and Design, section 7.1.
"""

import math


def direct_share(x_over_r: float, cycles: float) -> float:
    """Direct current over the peak √2·I of the symmetrical current after this many cycles: exp(−2π·τ/(X/R)).

    x_over_r may be infinite (no decay); zero means no direct current after the first moment.
    """
    if x_over_r <= 0:
        return 1.0 if cycles == 0 else 0.0
    return math.exp(-2 * math.pi * cycles / x_over_r)


def asymmetrical_rms_ka(symmetrical_ka: float, x_over_r: float, cycles: float) -> float:
    """R.m.s. current in kA after this many cycles, direct part at its largest: at first √3 times symmetrical."""
    return symmetrical_ka * math.sqrt(1 + 2 * direct_share(x_over_r, cycles) ** 2)
