"""X/R, peak current and fault level: what is read off a fault's symmetrical current.

Classical method (common practice); the peak factor of IEC 60909-0 belongs to that method.
"""

import numpy as np

from onelinefault.engine.network import ComplexArray, FloatArray


def x_over_r(z: ComplexArray) -> FloatArray:
    """X/R of impedances of any shape (...), the result's shape too.

    Infinite without resistance (or with nothing but rounding), not-a-number where the impedance is infinite.
    """
    z = np.asarray(z, np.complex128)
    resistance = np.where(abs(z.real) > 1e-12 * abs(z), z.real, 0.0)
    with np.errstate(all="ignore"):
        return np.where(np.isfinite(z), z.imag / resistance, np.nan)


def peak_ka(ik_ka: FloatArray, z: ComplexArray) -> FloatArray:
    """Asymmetrical peak at half a cycle, kA, shape (...): √2·I·(1 + exp(−π·R/X)).

    ik_ka: RMS symmetrical current in kA; z: the impedance it flows through, same shape. The d.c. part starts at its
    largest (fault at voltage zero) and decays with X/(ωR); half a cycle later π·R/X of its exponent is gone. No d.c.
    part where the impedance is capacitive or unknown (limited converter current). Source: common practice, R-L
    circuit.
    """
    z = np.asarray(z, np.complex128)
    inductive = np.isfinite(z) & (z.imag > 0)
    ratio = np.divide(np.maximum(z.real, 0.0), z.imag, out=np.zeros(z.shape), where=inductive)
    offset = np.where(inductive, np.exp(-np.pi * ratio), 0.0)
    peak: FloatArray = np.sqrt(2) * ik_ka * (1 + offset)
    return peak


def fault_level_mva(ik_ka: FloatArray, nominal_kv: FloatArray) -> FloatArray:
    """Fault level √3·Un·I in MVA of the largest phase current, any shape (...), the same as the arguments'.

    Source: IEC 60909-0, 1.3.6 (initial symmetrical short-circuit power).
    """
    level: FloatArray = np.sqrt(3) * nominal_kv * ik_ka
    return level
