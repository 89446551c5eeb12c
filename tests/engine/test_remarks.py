from onelinefault.engine import remarks
from onelinefault.model.findings import Severity


def test_each_remark_names_the_place_or_parts_and_says_what_to_do() -> None:
    found = [
        remarks.dead("Board A", ("p1",)),
        remarks.unearthed("Board A", ("p1",)),
        remarks.unsettled(["converter source PV1", "converter source PV2"], ("p1", "p2")),
        remarks.assumed(["T1", "W3"]),
    ]
    assert [finding.code for finding in found] == ["dead", "unearthed", "converter-unsettled", "assumed"]
    assert [finding.severity for finding in found] == [Severity.WARNING, Severity.HINT, Severity.WARNING, Severity.HINT]
    assert "Board A" in found[0].message and "Board A" in found[1].message
    assert "PV1, converter source PV2" in found[2].message and found[2].parts == ("p1", "p2")
    assert "T1, W3" in found[3].message
    assert all(finding.remedy.endswith(".") for finding in found)
