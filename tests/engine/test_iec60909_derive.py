"""A power station solved by hand, where several c, K and displacement rules meet; and rules that stand alone.

The hand solution, in ohm, to seven digits (IEC 60909-0:2016, clauses as in the modules; nothing of the package's code):

Feeder        ZQ = 1.1·110/(√3·20) = 3.492983, R/X 0.1: 0.3475634 + j3.475634 at 110 kV
Generator     UrG²/SrG = 1.8375; ZG = 0.0091875 + j0.275625 at 10.5 kV; sin φ = 0.6
T             xT = √(0.12² − 0.005²) = 0.1198958; on 115 kV 220.4167: ZT = 1.102083 + j26.42703; tr = 115/10.5
              its tap of −5 % does not count
K_S           (110/10.5)²·(10.5/115)²·1.1/(1 + |0.15 − 0.1198958|·0.6) = 0.9885711
K_G,S         1.1/(1 + 0.15·0.6) = 1.009174          K_T,S  1.1/(1 − 0.1198958·0.6) = 1.185265
AT            xT = 0.07977468, K_T with c of 6 kV (1.1): 0.95·1.1/(1 + 0.6·xT) = 0.9972661
              ZAT = 0.08246144 + j1.096376 at 10.5 kV
M6            0.75 MW per pole pair: R/X 0.15; two of 1.5 MW: ZM = 0.2732982 + j1.821988 at 6 kV
ST            xT = 0.05898305, K_T with c of 0.4 kV (1.05): 0.9634053
ML            R/X 0.42; five of 45 kW: 0.03673197 + j0.08745708 at 0.4 kV
Auxiliaries   at 6 kV M6 ∥ (ZST + ZML·(6.3/0.42)²) = 0.2818268 + j1.689180; with AT 0.8653137 + j5.788556 at 10.5 kV

Fault at Q: unit with its auxiliaries on the generator's terminals, K_S on both parts of the unit
              ZS = tr²·((K_S·ZG ∥ Zaux) + K_S·ZT,LV) = 2.290439 + j57.35800
              I″k = 1.1·110/√3/(ZQ ∥ ZS) = 21.21494: 20.00000 from the feeder, 1.216984 from the unit
              Ik without motors: ZS = tr²·K_S·(ZG + ZT,LV): 21.18488
              at 20 Hz R/X = 0.09638310: κ = 1.753922, ip = 52.62197; Ith (1 s): m = 0.03540251, 21.58720
              0.1 s: f·t = 5, fc/f = 0.055: R/X = 0.09067480, idc = 1.737845; 0.05 s: 0.092, 0.09376677, 6.878455
Terminals     1.1·10.5/√3: generator 23.96047 (K_G,S), transformer 22.96074 (K_T,S, with ZQ/tr²), auxiliaries 1.139337;
              sum of the phasors 48.05288
6 kV board    c = 1.1: network behind AT 8.525559 (K_G,S·ZG ∥ (K_T,S·ZT + ZQ/tr²)), M6 2.067335, ST 0.1616316: 10.74281
              Ib (0.1 s), meshed: G 0.7917897 times rated: μ = 1; M6 6.050000 times: μ·q = 0.3876227; ML 5.970863
              times: μ·q = 0.08332841; 10.74281 less the dips 9.426147
              κ(R/X of Zk) = 1.766272, ip(b) without 1.15 26.83417, with it (ML has R/X 0.42) and its limit of 2
              30.38524; ip(a) by AT's R/X 0.07521183 27.37785
0.4 kV board  c = 1.05: Z1 = 0.002047130 + j0.01031064; Z0 of ST alone 0.001869392 + j0.009522663
              three-phase 23.06787, two lines 19.97736, line to earth 23.67406
              two lines to earth: L2 23.37086, L3 23.39985, earth 24.31296
              line to earth: on the 6.3 kV side of ST (Dyn11) √3·I1·0.42/6.3 = 0.8124646 in two lines, none in the third
"""

import math
from dataclasses import replace

import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.iec60909_figures import IecFigures
from onelinefault.engine.study import Study
from onelinefault.errors import StudyError
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.engine.power_station import Station, station
from tests.oracle.sketch import Sketch

HAND = 2e-6  # the digits above
STATION = station()


def hand(value: float) -> object:
    return pytest.approx(value, rel=HAND)


def test_factors_of_the_power_station() -> None:
    outside, inside = STATION.fault("Q"), STATION.fault("6")
    assert STATION.factor("G", outside) == ("K_S", hand(0.9885711)) == STATION.factor("T", outside)
    assert STATION.factor("G", inside) == ("K_G,S", hand(1.009174))
    assert STATION.factor("T", inside) == ("K_T,S", hand(1.185265))
    for result in (outside, inside):
        assert STATION.factor("AT", result) == ("K_T", hand(0.9972661))
        assert STATION.factor("ST", result) == ("K_T", hand(0.9634053))
        assert STATION.factor("Q", result) == ("c", 1.1)


def test_fault_in_the_network() -> None:
    result, figures = STATION.fault("Q"), STATION.figures("Q")
    assert result.ik_ka == hand(21.21494)
    assert abs(result.terminal_ka[STATION.ids["Q"], "out"][0]) == hand(20.0)
    assert abs(result.terminal_ka[STATION.ids["T"], "high"][0]) == hand(1.216984)
    assert figures.ik_steady_ka == hand(21.18488)
    assert figures.peaks["c"].r_over_x == hand(0.09638310)
    assert (figures.kappa, figures.peak_ka) == (hand(1.753922), hand(52.62197))
    assert result.peak_ka == figures.peak_ka
    assert (figures.m, figures.n, figures.ith_ka) == (hand(0.03540251), 1.0, hand(21.58720))
    assert (figures.r_over_x_dc, figures.idc_ka) == (hand(0.09067480), hand(1.737845))
    sooner = STATION.figures("Q", minimum_time_delay_s=0.05)
    assert (sooner.r_over_x_dc, sooner.idc_ka) == (hand(0.09376677), hand(6.878455))


def test_fault_at_the_unit_s_terminals() -> None:
    result, figures = STATION.fault("G"), STATION.figures("G")
    assert result.ik_ka == hand(48.05288)
    generator, transformer = figures.partials
    assert (generator.part, transformer.part) == (STATION.ids["G"], STATION.ids["T"])
    assert (generator.ik_ka, transformer.ik_ka) == (hand(23.96047), hand(22.96074))
    assert abs(result.terminal_ka[STATION.ids["AT"], "high"][0]) == hand(1.139337)
    # each side by itself: κ of R/X = 0.1/3 and of K_T,S·ZT + ZQ/tr²
    assert generator.kappa == hand(1.02 + 0.98 * math.exp(-0.1))
    assert generator.ip_ka == hand(math.sqrt(2) * generator.kappa * 23.96047)
    assert transformer.kappa == hand(1.869779)
    # the generator feeds 7.3 times its rated current, the network does not decay
    times = 23.96047 / (60 / (math.sqrt(3) * 10.5))
    assert generator.ib_ka == hand((0.62 + 0.72 * math.exp(-0.32 * times)) * 23.96047)
    assert transformer.ib_ka == transformer.ik_ka


def test_fault_in_the_auxiliaries() -> None:
    result, figures = STATION.fault("6"), STATION.figures("6")
    assert result.ik_ka == hand(10.74281)
    parts = {"AT": ("low", 8.525559), "M6": ("line", 2.067335), "ST": ("high", 0.1616316)}
    for part, (terminal, ka) in parts.items():
        assert abs(result.terminal_ka[STATION.ids[part], terminal][0]) == hand(ka)
    machines = {share.part: share for share in figures.machines}
    wanted = {"G": (0.7917897, 1.0), "M6": (6.05, 0.3876227), "ML": (5.970863, 0.08332841)}
    for part, (times, left) in wanted.items():
        share = machines[STATION.ids[part]]
        assert (share.times_rated, share.left) == (hand(times), hand(left))
    assert not figures.apart and figures.ib_ka == figures.ib_meshed_ka == hand(9.426147)
    assert figures.motor_share == hand(10.742806 / 8.5255588 - 1) and not figures.motors_negligible
    assert figures.peaks["b-plain"].ip_ka == hand(26.83417)
    assert figures.peaks["b"].ip_ka == hand(30.38524)
    assert (figures.peaks["a"].r_over_x, figures.peaks["a"].ip_ka) == (hand(0.07521183), hand(27.37785))
    assert figures.partials == ()


def test_faults_at_the_low_voltage_board() -> None:
    three, one = STATION.fault("04"), STATION.fault("04", FaultKind.LINE_TO_EARTH)
    assert three.z_ohm[0] == hand(0.002047130 + 0.01031064j) and three.z_ohm[2] == hand(0.001869392 + 0.009522663j)
    assert (three.ik_ka, one.ik_ka) == (hand(23.06787), hand(23.67406))
    assert STATION.fault("04", FaultKind.LINE_TO_LINE).ik_ka == hand(19.97736)
    both = STATION.figures("04", FaultKind.TWO_LINES_TO_EARTH)
    assert both.lines_ka[1:] == (hand(23.37086), hand(23.39985)) and both.earth_ka == hand(24.31296)
    sizes = sorted(abs(one.terminal_ka[STATION.ids["ST"], "high"]))
    assert sizes == [pytest.approx(0, abs=1e-12), hand(0.8124646), hand(0.8124646)]


def test_smallest_currents_leave_out_the_motors() -> None:
    # c = 1.0 and ZQ = 1.0·110/(√3·12); K_S as for the largest (its c_max stays)
    zq = (0.1 + 1j) * 110 / (math.sqrt(3) * 12) / math.hypot(1, 0.1)
    zs = (115 / 10.5) ** 2 * 0.98857113 * (0.0091875 + 0.275625j) + 0.98857113 * (1.1020833 + 26.427035j)
    wanted = 110 / math.sqrt(3) * abs(1 / zq + 1 / zs)
    figures = STATION.figures("Q", level="min")
    assert figures.ik_ka == hand(wanted) == figures.ik_steady_ka
    assert figures.motors_negligible and figures.motor_share == 0 and figures.c == 1.0
    names = {c.part for c in STATION.study(level="min").network.corrections}
    assert STATION.ids["M6"] not in names and STATION.study(level="min").network.sources[-1].part == STATION.ids["G"]


def test_small_motors_are_left_out_where_that_is_asked_for_and_allowed() -> None:
    # at Q the motors add 0.14 % of I″k, at the 6 kV board 26 %
    study, plain = STATION.study(leave_out_small_motors=True), STATION.study()
    at_q, at_6 = (study.fault(Fault(Place(*STATION.at[bus]))) for bus in ("Q", "6"))
    assert at_q.ik_ka == hand(21.18488) and (at_q.terminal_ka[STATION.ids["M6"], "line"] == 0).all()
    assert at_6.ik_ka == hand(10.74281)
    rows = {row.part: row for row in study.all_buses((FaultKind.THREE_PHASE,))}
    assert (rows[STATION.at["Q"][0]].ik_ka, rows[STATION.at["6"][0]].ik_ka) == (hand(21.18488), hand(10.74281))
    assert plain.fault(Fault(Place(*STATION.at["Q"]))).ik_ka == hand(21.21494)


@pytest.mark.parametrize("kind", list(FaultKind))
def test_unbalanced_breaking_and_steady_currents_are_initial_ones(kind: FaultKind) -> None:
    figures = STATION.figures("04", kind)
    if kind is FaultKind.THREE_PHASE:
        assert figures.ib_ka < figures.ik_ka and figures.ik_steady_ka < figures.ik_ka
    else:
        assert figures.ib_ka == figures.ik_ka == figures.ik_steady_ka


def test_kappa_of_an_earth_fault_is_that_of_its_own_loop() -> None:
    # 2·Z1 + Z0 at the 0.4 kV board
    loop = 2 * (0.002047130 + 0.01031064j) + 0.001869392 + 0.009522663j
    figures = STATION.figures("04", FaultKind.LINE_TO_EARTH)
    assert figures.peaks["b-plain"].kappa == hand(1.02 + 0.98 * math.exp(-3 * loop.real / loop.imag))


def test_a_fault_along_a_cable_is_a_fault_at_a_bus_put_there() -> None:
    def cables(split: bool) -> tuple[Study, Fault]:
        s = Sketch(frequency="60 Hz")
        per_km = {"r_per_length": "0.3 ohm/km", "x_per_length": "0.1 ohm/km", "r0_per_length": "1 ohm/km",
                  "x0_per_length": "0.3 ohm/km"}  # fmt: skip
        ends = s.bus(10.0), s.bus(10.0)
        s.hang("supply", ends[0], nominal_voltage="10 kV", fault_level_max="16 kA", x0_over_x1="1")
        s.hang(
            "induction_motor", ends[1], rated_power="2 MW", rated_voltage="10 kV", poles="4",
            efficiency="95 %", power_factor="0.9",
        )  # fmt: skip
        if not split:
            cable = s.hang("cable", *ends, length="2 km", **per_km)
            return Study(s.plant, Case(method="iec60909")), Fault(Place(cable, "a", None, 0.25))
        middle = s.bus(10.0)
        s.hang("cable", ends[0], middle, length="0.5 km", **per_km)
        s.hang("cable", middle, ends[1], length="1.5 km", **per_km)
        return Study(s.plant, Case(method="iec60909")), Fault(Place(*middle))

    found = []
    for split in (False, True):
        study, fault = cables(split)
        for kind in FaultKind:
            figures = study.fault(replace(fault, kind=kind, zf_ohm=0.1 + 0.2j)).figures
            assert isinstance(figures, IecFigures)
            found.append(figures)
    for one, other in zip(found[:4], found[4:], strict=True):
        for name in (
            "lines_ka",
            "earth_ka",
            "ib_meshed_ka",
            "ib_apart_ka",
            "idc_ka",
            "ith_ka",
            "ik_steady_ka",
            "motor_share",
        ):
            assert getattr(one, name) == pytest.approx(getattr(other, name), rel=1e-9, abs=1e-12), name
        assert one.apart and other.apart
        for method, peak in one.peaks.items():
            assert peak.ip_ka == pytest.approx(other.peaks[method].ip_ka, rel=1e-9), method


@pytest.mark.parametrize(
    ("case", "words"),
    [
        ({"level": "largest"}, "largest (max)"),
        ({"peak_method": "d"}, "peak method"),
        ({"minimum_time_delay_s": -0.1}, "minimum time delay"),
        ({"duration_s": math.nan}, "duration"),
        ({"lv_tolerance_percent": 8}, "6 % or 10 %"),
    ],
)
def test_impossible_cases_are_refused(case: dict[str, str | float], words: str) -> None:
    with pytest.raises(StudyError, match=words.replace("(", r"\(").replace(")", r"\)")):
        _ = STATION.study(**case).findings


def test_figures_read_as_rows() -> None:
    rows = {row.symbol: row for row in STATION.figures("6").rows()}
    assert list(rows)[:5] == ["c", "I″k", "I″kE", "κ", "ip"]
    assert rows["Ib"].value == hand(9.426147) and "meshed" in rows["Ib"].note and "0.1 s" in rows["Ib"].note
    assert rows["ip"].unit == "kA" and rows["ip"].note == "method (c)" and rows["ip(b)"].value == hand(30.38524)


def test_dead_places_have_no_figures() -> None:
    plant = STATION.plant
    feeding = [STATION.ids[name] for name in ("Q", "G")]
    parts = {**plant.parts, **{i: replace(plant.parts[i], in_service=False) for i in feeding}}
    dead = Station(replace(plant, parts=parts), STATION.at, STATION.ids)
    result = dead.fault("6", level="min")
    assert result.figures is None and result.ik_ka == 0 and [f.code for f in result.findings] == ["dead"]
    assert {row.figures for row in dead.study(level="min").all_buses()} == {None}
    # by the largest current the motors feed one another; without them nothing is left to go on
    figures = dead.figures("6")
    assert figures.ik_steady_ka == 0 and figures.motor_share == math.inf
    assert figures.ik_ka == hand(1.1 * 6 / math.sqrt(3) / abs(0.2818268 + 1.689180j))
