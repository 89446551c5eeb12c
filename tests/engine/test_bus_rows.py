import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.model.consumers import Bus
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.engine.networks import INF, Sketch, random_sketch


@settings(max_examples=25, deadline=None)
@given(st.integers(0, 2**32 - 1), st.booleans(), st.sampled_from(["nominal", "no-load"]))
def test_every_row_is_the_single_fault(seed: int, converters: bool, prefault: str) -> None:
    sketch = random_sketch(np.random.default_rng(seed), prefault="1.03 pu")
    if converters:
        sketch.converter(0, 0.3)
    study = sketch.study(prefault=prefault)
    rows = study.all_buses()
    assert [(row.part, row.kind) for row in rows] == [
        (f"B{k}", kind) for k in range(len(sketch.kv)) for kind in FaultKind
    ]
    for row in rows:
        single = study.fault(Fault(Place(row.part), FaultKind(row.kind)))
        size = max(single.ik_ka, study.network.base_ka[single.node])
        assert row.ik_ka == pytest.approx(single.ik_ka, abs=1e-9 * size)
        assert row.phases_ka == pytest.approx(abs(single.phases_ka), abs=1e-9 * size)
        phasors = np.array(row.phases_ka) * np.exp(1j * np.deg2rad(row.phases_deg))
        assert np.allclose(phasors, single.phases_ka, rtol=0, atol=1e-9 * size)
        assert row.residual_ka == pytest.approx(abs(single.residual_ka), abs=1e-9 * size)
        assert row.fault_level_mva == pytest.approx(single.fault_level_mva, rel=1e-9, abs=1e-9 * 100)
        assert row.peak_ka == pytest.approx(single.peak_ka, rel=1e-9, abs=1e-9 * size)
        assert row.nominal_kv == single.nominal_kv and row.assumed == study.assumed.get(0, ())
        assert (row.x_over_r is None) == bool(np.isnan(single.x_over_r))
        if row.x_over_r is not None:
            assert row.x_over_r == pytest.approx(single.x_over_r, rel=1e-6)
        for pair, z in zip((row.z1_ohm, row.z2_ohm, row.z0_ohm), single.z_ohm, strict=True):
            assert (pair is None) == (z is None)
            assert pair is None or complex(*pair) == pytest.approx(z, rel=1e-9)


def test_dead_buses_joints_and_two_buses_of_one_node() -> None:
    s = Sketch()
    a, _dead = s.node(), s.node(6)
    s.source(a, (0.1j, 0.1j, INF))
    s.terminals[a].append(("twin", "bar"))
    s.parts["twin"] = Bus(id="twin", name="Twin", length=4)
    s.parts["joint"] = Bus(id="joint", name="Joint", length=0)
    s.parts["lost"] = Bus(id="lost", length=3)
    rows = s.study().all_buses([FaultKind.THREE_PHASE, FaultKind.LINE_TO_EARTH])
    assert [row.bus for row in rows[::2]] == ["Bus 0", "Bus 1", "Twin", "lost"]
    live, dead, twin, lost = rows[::2]
    assert twin.ik_ka == live.ik_ka > 0
    for row, kv in ((dead, 6), (lost, 0)):
        assert (row.ik_ka, row.nominal_kv, row.x_over_r, row.z1_ohm, row.peak_ka) == (0, kv, None, None, 0)
    assert rows[1].ik_ka == 0 and rows[1].z0_ohm is None and rows[1].x_over_r is None
    assert rows[1].z1_ohm == pytest.approx((0, 0.1), abs=1e-15)


def test_a_plant_without_live_buses() -> None:
    s = Sketch()
    s.node()
    assert [row.ik_ka for row in s.study().all_buses()] == [0, 0, 0, 0]
    assert Sketch().study().all_buses() == []
