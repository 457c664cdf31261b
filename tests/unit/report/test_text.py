"""The plain summary holds each finding, each unread place and the counts, one line each."""

from dossiercheck.report.document import document
from dossiercheck.report.text import summary
from tests.unit.report import sample


def test_lines_of_the_sample() -> None:
    lines = summary(document(sample.review())).splitlines()
    assert lines[0] == (
        "CRITICAL  Ovestrilide: The name says 4S for the pyrrolidine centre that the drawing "
        "shows as R."
    )
    assert lines[1] == (
        "    Drawing in m3/32-body-data/32s-drug-sub/ovestrilide/structures.sdf, record 1"
    )
    assert "Not read: 3 places" in lines
    assert (
        sum(line.split("  ")[0] in {"CRITICAL", "MAJOR", "MINOR", "REMARK"} for line in lines) == 6
    )
    for finding in sample.FINDINGS:
        assert any(line.endswith(finding.message) for line in lines)
    for unread in sample.UNREAD:
        assert any(line.endswith(unread.detail) for line in lines)
    assert lines[-3] == "Examined 6 sources, 4 substances, evidence from 14 places."
    assert lines[-2] == document(sample.review())["verdict"]
    assert lines[-1] == sample.CAUTION


def test_no_text_of_a_dossier_steers_the_terminal() -> None:
    text = summary(document(sample.hostile()))
    assert not [one for one in text if ord(one) < 32 and one != "\n"]
    assert "\u202e" not in text
    assert "U+001B" in text


def test_nothing_read() -> None:
    assert summary(document(sample.empty())) == (
        "Examined 0 sources, 0 substances, evidence from 0 places.\n"
        "Nothing could be compared: no place of the dossier gave evidence. "
        "No place was left unread.\n"
        f"{sample.CAUTION}\n"
    )
