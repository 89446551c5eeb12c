"""Figures as people read them: three significant digits, a true minus sign, the unit that keeps the number handy."""

import cmath
import math


def figure(value: float, digits: int = 3) -> str:
    """A number with so many significant digits, never in powers of ten between 0.001 and 100 000.

    >>> figure(12.936), figure(0.40251), figure(1590.4), figure(-0.5)
    ('12.9', '0.403', '1590', '−0.500')
    """
    if not math.isfinite(value):
        return "∞" if value > 0 else "–"
    if value == 0:
        return "0"
    size = math.floor(math.log10(abs(float(f"{value:.{digits - 1}e}"))))
    if not -4 <= size < 6:
        return f"{value:.{digits - 1}e}".replace("-", "−")
    text = f"{value:.{max(digits - 1 - size, 0)}f}"
    return text.replace("-", "−")


def current_text(ka: float) -> str:
    """A current in kA, in A below 0.1 kA.

    >>> current_text(12.936), current_text(0.0421)
    ('12.9 kA', '42.1 A')
    """
    if abs(ka) < 0.1:
        return f"{figure(ka * 1000)} A" if abs(ka) >= 5e-7 else "0 A"
    return f"{figure(ka)} kA"


def voltage_text(kv: float) -> str:
    """A nominal voltage as typed on drawings: kV from 0.1 kV up to any height, four digits at most."""
    return f"{kv:.4g} kV"


def angle_deg(value: complex) -> float:
    """Angle of a complex number in degrees, −180 to 180; zero for zero."""
    return math.degrees(cmath.phase(value)) if value else 0.0


def angle_text(value: complex) -> str:
    """The angle of a phasor: "∠ −87°"."""
    return f"∠ {angle_deg(value):.0f}°".replace("-", "−").replace("−0°", "0°")
