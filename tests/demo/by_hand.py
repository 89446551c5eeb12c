"""The demo plants' key figures worked by hand: ohms per phase at one voltage, nameplate figures written out as numbers.

Nothing here comes from the program: not its parts, not its tables, not its per unit. Impedances are complex ohms per
phase, voltages kV line to line, currents kA. All figures are for the normal arrangement (ties open), the largest fault
level, conductors at 20 °C and the nominal voltage before the fault. Motors: Z = U²/S · (I rated / I locked rotor).
"""

from __future__ import annotations

import math

import numpy as np

HP_KW = 0.7457  # mechanical horsepower
HOT_COPPER = (234.5 + 20) / (234.5 + 75)  # from the table's 75 °C down to 20 °C (IEC 60949)
HOT_ALUMINIUM = (228 + 20) / (228 + 75)


def of_ratio(size: float, x_over_r: float) -> complex:
    """An impedance of a magnitude, ohm, and a ratio X/R."""
    r = size / math.sqrt(1 + x_over_r**2)
    return complex(r, r * x_over_r)


def beside(*impedances: complex) -> complex:
    """Impedances in parallel."""
    return 1 / sum(1 / z for z in impedances)


def motor(shaft_kw: float, kv: float, efficiency: float, pf: float, locked: float, x_over_r: float) -> complex:
    """Locked-rotor impedance of one induction motor, ohm."""
    mva = shaft_kw / 1000 / (efficiency * pf)
    return of_ratio(kv**2 / (mva * locked), x_over_r)


def three_phase_ka(kv: float, z1: complex) -> float:
    """Three-phase fault current."""
    return kv / math.sqrt(3) / abs(z1)


def line_to_earth_ka(kv: float, z1: complex, z2: complex, z0: complex) -> float:
    """Line-to-earth fault current."""
    return 3 * kv / math.sqrt(3) / abs(z1 + z2 + z0)


def mill() -> dict[tuple[str, str], float]:
    """Lindermoor Mill: the half that Grid A feeds, and MCC 2 with the winder drive."""
    # 33 kV: Grid A 900 MVA with X/R 14, then 1.8 km of cable
    upstream_33 = of_ratio(33**2 / 900, 14) + 1.8 * complex(0.100, 0.112)
    # T1, at 11 kV: 10 % of 11²/20 = 0.605 ohm; losses 92 kW make R = 0.092/20 of 11²/20; ratio with −2.5 % of tap
    r_t1 = 0.092 / 20 * 11**2 / 20
    t1 = complex(r_t1, math.sqrt(0.605**2 - r_t1**2))
    ratio_t1 = 33 * 0.975 / 11
    w3 = 0.060 * complex(0.0283, 0.095) / 2
    # on Board A: G1 (R from Ta = 180 ms: X2/ω Ta), refiners behind W11, and what MCC 1 feeds back
    g1_ohm = 11**2 / 12.5
    r_g1 = 0.16 * g1_ohm / (2 * math.pi * 50 * 0.180)
    g1, g1_negative = complex(r_g1, 0.14 * g1_ohm), complex(r_g1, 0.16 * g1_ohm)
    refiners = motor(1200, 11, 0.958, 0.88, 5.5, 1 / 0.15) / 3 + 0.220 * complex(0.193, 0.11)
    # TL1, at 0.42 kV: 6 % of 0.42²/1.6; ratio with +2.5 % of tap; W12 before it
    tl1_ohm = 0.42**2 / 1.6
    r_tl1 = 0.0145 / 1.6 * tl1_ohm
    tl1 = complex(r_tl1, math.sqrt((0.06 * tl1_ohm) ** 2 - r_tl1**2))
    ratio_tl1 = 11 * 1.025 / 0.42
    w12 = 0.150 * complex(0.193, 0.11)
    fans = motor(75, 0.4, 0.945, 0.87, 6.8, 1 / 0.42) / (6 * 0.80)
    broke = motor(200, 0.4, 0.956, 0.88, 7.1, 1 / 0.42) + 0.085 * complex(0.124, 0.072)
    stock = motor(110, 0.4, 0.95, 0.87, 6.9, 1 / 0.42) / 4
    motors_1 = beside(fans, broke, stock)
    mcc_1_from_11 = w12 + (tl1 + motors_1) * ratio_tl1**2

    t1_side = upstream_33 / ratio_t1**2 + t1 + w3
    board_a = beside(t1_side, g1, refiners, mcc_1_from_11)
    board_a_negative = beside(t1_side, g1_negative, refiners, mcc_1_from_11)
    # earth at Board A: T1 with 90 % of its leakage and G1 with X0 = 7 %, each with a resistor of 400 A at 11/√3 kV
    resistor = 11 / math.sqrt(3) / 0.400
    zero_t1 = 0.90 * t1 + 3 * resistor + 0.060 * complex(0.11, 0.25) / 2
    zero_g1 = complex(r_g1, 0.07 * g1_ohm) + 3 * resistor
    board_a_zero = beside(zero_t1, zero_g1)

    intake_a = beside(upstream_33, (t1 + w3 + beside(g1, refiners, mcc_1_from_11)) * ratio_t1**2)
    feeding_11 = beside(t1_side, g1, refiners) + w12
    feeding_11_negative = beside(t1_side, g1_negative, refiners) + w12
    mcc_1 = beside(feeding_11 / ratio_tl1**2 + tl1, motors_1)
    mcc_1_negative = beside(feeding_11_negative / ratio_tl1**2 + tl1, motors_1)
    return {
        ("Intake A", "three-phase"): three_phase_ka(33, intake_a),
        ("Board A", "three-phase"): three_phase_ka(11, board_a),
        ("Board A", "line-to-earth"): line_to_earth_ka(11, board_a, board_a_negative, board_a_zero),
        ("MCC 1", "three-phase"): three_phase_ka(0.42, mcc_1),
        ("MCC 1", "line-to-earth"): line_to_earth_ka(0.42, mcc_1, mcc_1_negative, 0.95 * tl1),
        ("MCC 2", "three-phase"): _mill_mcc_2_ka(),
    }


def _mill_mcc_2_ka() -> float:
    """MCC 2 with the winder drive, which feeds 1.5 times its rated current, a quarter period behind the voltage."""
    upstream_33 = of_ratio(33**2 / 640, 11) + 2.6 * complex(0.158, 0.36)
    t2 = of_ratio(0.102 * 11**2 / 20, 22)
    w4 = 0.085 * complex(0.0283, 0.095) / 2
    pumps = motor(630, 11, 0.952, 0.86, 5.8, 1 / 0.15) / (4 * 0.75) + 0.310 * complex(0.153, 0.105)
    board_b = beside(upstream_33 / (33 * 0.975 / 11) ** 2 + t2 + w4, pumps)
    # aluminium 150 mm² 0.206 ohm/km (IEC 60228), three-core 0.1 ohm/km; TL2's losses as usual for its size: X/R 6.59
    w14 = 0.420 * complex(0.206, 0.1)
    tl2 = of_ratio(0.06 * 0.42**2 / 2, 6.59)
    screens = motor(55, 0.4, 0.94, 0.86, 6.7, 1 / 0.42) / 5
    conveyors = motor(15, 0.4, 0.915, 0.84, 7, 1 / 0.42) / 8 + 45 * complex(0.036, 0.017) / 1000
    linear = beside((board_b + w14) / (11 * 1.025 / 0.42) ** 2 + tl2, screens, conveyors)
    winder_ka = 1.5 * 0.630 / (math.sqrt(3) * 0.42)
    return abs(0.42 / math.sqrt(3) / linear - 1j * winder_ka)


def quarry() -> dict[tuple[str, str], float]:
    """Sorrel Gap Quarry: both halves hang on one 69 kV yard, so each feeds back through it into the other's faults."""
    # 69 kV: Utility 1150 MVA with X/R 8, then 1.4 mi of line whose R holds at 25 °C
    to_20 = (228 + 20) / (228 + 25)
    utility = of_ratio(69**2 / 1150, 8) + 1.4 * complex(0.306 * to_20, 0.756)
    t1 = of_ratio(0.079 * 4.16**2 / 7.5, 18)
    r_t2 = 0.041 / 7.5 * 4.16**2 / 7.5
    t2 = complex(r_t2, math.sqrt((0.077 * 4.16**2 / 7.5) ** 2 - r_t2**2))
    ratio = 69 * 0.975 / 4.16  # both transformers
    crusher, crusher_negative = _crusher_ohm()
    tl1, motors_1, w13 = _tl1_and_behind()
    mcc_1_from_4 = w13 + (tl1 + motors_1) * (4.16 / 0.48) ** 2
    side_a, side_a_negative = beside(crusher, mcc_1_from_4), beside(crusher_negative, mcc_1_from_4)
    others_b, behind_pit = _board_b_motors_ohm()
    l2, l2_zero = pit_line_ohm()
    side_b = beside(others_b, l2 + behind_pit)

    t2_at_69 = (t2 + side_b) * ratio**2
    yard = beside(utility, (t1 + side_a) * ratio**2, t2_at_69)
    through_t1 = beside(utility, t2_at_69) / ratio**2 + t1
    swgr_a = beside(through_t1, side_a)
    swgr_a_negative = beside(through_t1, side_a_negative)
    # earth at SWGR A: only TE1, 2.4 ohm with X0/R0 = 8, and its resistor of 200 A at 4.16/√3 kV; T1 is in delta
    swgr_a_zero = of_ratio(2.4, 8) + 3 * 4.16 / math.sqrt(3) / 0.200
    feeding, feeding_negative = (beside(through_t1, z) + w13 for z in (crusher, crusher_negative))
    mcc_1, mcc_1_negative = (beside(z / (4.16 / 0.48) ** 2 + tl1, motors_1) for z in (feeding, feeding_negative))
    # the pit: its Z2 differs from Z1 through the crusher alone, from far away; earth over T2's 50 A resistor and L2
    through_t2, through_t2_negative = (
        beside(utility, (t1 + z) * ratio**2) / ratio**2 + t2 for z in (side_a, side_a_negative)
    )
    pit, pit_negative = (beside(beside(z, others_b) + l2, behind_pit) for z in (through_t2, through_t2_negative))
    pit_zero = 0.88 * t2 + 3 * 4.16 / math.sqrt(3) / 0.050 + l2_zero
    return {
        ("Yard", "three-phase"): three_phase_ka(69, yard),
        ("SWGR A", "three-phase"): three_phase_ka(4.16, swgr_a),
        ("SWGR A", "line-to-earth"): line_to_earth_ka(4.16, swgr_a, swgr_a_negative, swgr_a_zero),
        ("MCC 1", "three-phase"): three_phase_ka(0.48, mcc_1),
        ("MCC 1", "line-to-earth"): line_to_earth_ka(0.48, mcc_1, mcc_1_negative, 0.98 * tl1),
        ("Pit", "three-phase"): three_phase_ka(4.16, pit),
        ("Pit", "line-to-earth"): line_to_earth_ka(4.16, pit, pit_negative, pit_zero),
        ("Pumps", "line-to-earth"): 0.0,  # no neutral anywhere on the pumps board
    }


def _crusher_ohm() -> tuple[complex, complex]:
    """The crusher's synchronous motor behind W12: subtransient and negative sequence, at 4.16 kV.

    500 kcmil in steel conduit: 0.029 ohm at 75 °C and 0.048 ohm, both per 1000 ft (NEC chapter 9 table 9).
    """
    own_ohm = 4**2 / (2500 * HP_KW / 1000 / (0.958 * 0.8))
    r = 0.18 * own_ohm / 28
    w12 = 0.320 * complex(0.029 * HOT_COPPER, 0.048)
    return complex(r, 0.18 * own_ohm) + w12, complex(r, 0.20 * own_ohm) + w12


def _tl1_and_behind() -> tuple[complex, complex, complex]:
    """TL1 and the motors of MCC 1 at 0.48 kV, and W13 at 4.16 kV. 250 kcmil in steel: 0.054 at 75 °C, 0.052."""
    tl1 = of_ratio(0.0575 * 0.48**2 / 1.0, 5.8)
    conveyors = motor(75 * HP_KW, 0.46, 0.941, 0.86, 6.4, 1 / 0.42) / 6
    feeder = motor(200 * HP_KW, 0.46, 0.95, 0.87, 6.1, 1 / 0.42) + 0.180 * complex(0.054 * HOT_COPPER, 0.052)
    return tl1, beside(conveyors, feeder), 0.240 * complex(0.063 * HOT_COPPER, 0.051)


def _board_b_motors_ohm() -> tuple[complex, complex]:
    """What feeds back at 4.16 kV: cone crushers and MCC 2 at SWGR B; shovel and dewatering at the pit's bus."""
    cones = motor(600 * HP_KW, 4, 0.945, 0.87, 6.2, 1 / 0.15) / 2 + 0.410 / 2 * complex(0.054 * HOT_COPPER, 0.052)
    screens = motor(100 * HP_KW, 0.46, 0.945, 0.87, 6.5, 1 / 0.42) / 4
    fans = motor(150 * HP_KW, 0.46, 0.95, 0.88, 6.5, 1 / 0.42) / (3 * 0.67)
    # TL2 at 0.48 kV, X/R 6.49 as usual for its size; W24 is 350 kcmil aluminium in plastic conduit: 0.061 and 0.040
    tl2 = of_ratio(0.0575 * 0.48**2 / 1.5, 6.49)
    w24 = 0.520 * complex(0.061 * HOT_ALUMINIUM, 0.040)
    mcc_2 = w24 + (tl2 + beside(screens, fans)) * (4.16 / 0.48) ** 2
    shovel = motor(700 * HP_KW, 4, 0.948, 0.88, 5.9, 1 / 0.15)
    dewatering = motor(100 * HP_KW, 0.46, 0.945, 0.87, 6.3, 1 / 0.42) / 2
    tl3 = of_ratio(0.05 * 0.48**2 / 0.5, 4.5)
    pit = beside(shovel, (tl3 + dewatering) * (4.16 / 0.48) ** 2)
    return beside(cones, mcc_2), pit


def pit_line_ohm() -> tuple[complex, complex]:
    """Z1 and Z0 of the quarry's line L2, 3200 ft, by its geometry in feet.

    Carson's equations as printed for 60 Hz in ohm per mile (Kersting, chapter 4): earth 0.09530, logarithms times
    0.12134, and 7.6786 + ½·ln(ρ/f) for the earth's return at ρ = 400 ohm·m.
    """
    places = ((-3.67, 31.0), (0.0, 32.5), (3.67, 31.0), (0.0, 26.0))
    to_20 = (228 + 20) / (228 + 50)  # R holds at 50 °C
    r, gmr = (0.592, 0.592, 0.592, 1.12), (0.00814, 0.00814, 0.00814, 0.00446)
    z = np.zeros((4, 4), complex)
    for i, (xi, yi) in enumerate(places):
        for j, (xj, yj) in enumerate(places):
            apart = gmr[i] if i == j else math.hypot(xi - xj, yi - yj)
            own = r[i] * to_20 if i == j else 0.0
            z[i, j] = own + 0.09530 + 0.12134j * (math.log(1 / apart) + 7.6786 + 0.5 * math.log(400 / 60))
    phases = z[:3, :3] - np.outer(z[:3, 3], z[3, :3]) / z[3, 3]  # the neutral is earthed along the line
    alone, mutual = complex(phases.trace()) / 3, complex(phases.sum() - phases.trace()) / 6
    miles = 3200 / 5280
    return (alone - mutual) * miles, (alone + 2 * mutual) * miles
