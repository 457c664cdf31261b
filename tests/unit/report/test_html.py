"""The page: complete, self-contained, well formed, and deaf to what a dossier's text may try."""

import html as entities
import json
import re
from dataclasses import replace

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from lxml import etree
from lxml import html as parser

from dossiercheck.model import Review
from dossiercheck.report import html, jsonfile
from dossiercheck.report.document import document
from dossiercheck.report.view import page
from dossiercheck.report.visible import visible
from tests.unit.report import sample


def rendered(review: Review, **limits: int) -> str:
    return html.render(document(review), **limits).decode("utf-8")


@pytest.fixture(scope="module")
def text() -> str:
    return rendered(sample.review())


@pytest.fixture(scope="module")
def tree(text: str) -> etree._Element:
    return parser.document_fromstring(text)


def words(node: etree._Element) -> str:
    return " ".join(node.text_content().split())


def test_made_from_the_document_alone() -> None:
    made = document(sample.review())
    assert html.render(json.loads(jsonfile.render(made))) == html.render(made)


def test_same_bytes_twice() -> None:
    assert rendered(sample.review()) == rendered(sample.review())


def test_every_finding_with_its_sides_is_there(tree: etree._Element) -> None:
    cards = {one.findtext(".//h4"): one for one in tree.iter("article")}
    assert len(cards) == len(sample.FINDINGS)
    for finding in sample.FINDINGS:
        card = cards[finding.message]
        said = words(card)
        assert finding.remedy in said
        assert finding.rule in said
        assert card.get("data-grade") == finding.grade.value
        for step in finding.derivation:
            assert step in said
        figures = card.findall(".//figure")
        assert len(figures) == len(finding.exhibits)
        for figure, exhibit in zip(figures, finding.exhibits, strict=True):
            assert str(exhibit.place) in words(figure)
            assert exhibit.place.source in words(figure)
            marks = [one.text_content() for one in figure.iter("mark")]
            assert marks == [exhibit.text[a:b] for a, b in exhibit.marks]
            link = figure.find(".//p[@class='cited']/a")
            if link is None:
                quoted = figure.find(".//*[@translate='no']")
                assert quoted.text_content() == exhibit.text
            else:
                # A connection table stands once on the page: the link leads to the same text.
                row = tree.get_element_by_id(link.get("href")[1:])
                assert row.getnext().find(".//pre").text_content() == exhibit.text


def test_gravest_first_within_a_substance(tree: etree._Element) -> None:
    grades = [one.get("data-grade") for one in tree.iter("article")]
    assert grades == ["critical", "major", "major", "major", "remark", "critical"]


def test_headline_tells_what_was_not_read(tree: etree._Element) -> None:
    head = tree.find(".//section[@class='headline']")
    said = words(head)
    assert "3 places were not read" in said
    for unread in sample.UNREAD:
        assert unread.detail in said
        assert unread.place.source in said
    assert sample.CAUTION in said
    assert words(tree.find(".//footer")).count(sample.CAUTION) == 1


def test_concordance_table_has_unit_rows_and_evidence_columns(tree: etree._Element) -> None:
    table = tree.find(".//section[@id='s1']//table[@class='concordance']")
    heads = [words(one) for one in table.findall("thead/tr/th")]
    assert heads == [
        "Unit",
        "E1 molfile reference",
        "E2 systematic name",
        "E3 SMILES",
        "E4 systematic name",
        "E5 InChIKey",
    ]
    rows = [[words(cell) for cell in row] for row in table.findall("tbody/tr")]
    assert rows[0] == ["Constitution", "reference", "same", "same", "same", "first block agrees"]
    assert rows[3][1:] == ["R = agrees", "S ≠ differs", "R = agrees", "R = agrees", "no entry"]
    assert rows[3][0] == "U3 centre 4′atom 18"
    assert rows[4][3].startswith("R or S ? undetermined")
    assert rows[5][4] == "— ○ silent"


def test_names_may_break_after_a_hyphen_and_nowhere_else(text: str) -> None:
    marked = re.search(r'<p class="verbatim"[^>]*>(methyl .*?)</p>', text).group(1)
    assert marked.count("<wbr>") == marked.count("-") == sample.WRONG_NAME.count("-")
    assert "<wbr>" not in "".join(re.findall(r"<pre.*?</pre>", text, re.DOTALL))


def test_typographic_hyphens_break_too() -> None:
    exhibit = sample.replace(
        sample.FINDINGS[4].exhibits[0], text="2\u2010a\u2011b\u2212c", marks=()
    )
    finding = sample.replace(sample.FINDINGS[4], exhibits=(exhibit,))
    text = rendered(sample.replace(sample.review(), findings=(finding,)))
    assert ">2\u2010<wbr>a\u2011<wbr>b\u2212<wbr>c</p>" in text


def test_reference_is_called_so_where_the_constitution_does_not_list_it() -> None:
    bare = sample.replace(sample.CLEAN.concordance, constitution={"E13": "same"})
    entry = sample.replace(sample.CLEAN, concordance=bare)
    text = rendered(sample.replace(sample.clean(), substances=(entry,)))
    row = parser.document_fromstring(text).find(".//tr[@class='constitution']")
    assert [words(one) for one in row] == ["Constitution", "reference", "same"]


def test_method_sources_and_rules_are_listed(tree: etree._Element) -> None:
    said = words(tree)
    for heading, value in sample.METHOD.items():
        assert heading in said
        assert value in said
    for source in sample.SOURCES:
        assert source.sha256 in said
    for rule in sample.RULES:
        assert rule.title in said
        assert rule.off in said
    for substance in (sample.OVESTRILIDE, sample.TARTRATE):
        for reason in substance.attribution.values():
            assert reason in said


def test_nothing_is_fetched(text: str, tree: etree._Element) -> None:
    for node in tree.iter():
        for name, value in node.attrib.items():
            assert name.lower() not in {"src", "srcset", "action", "data", "style"}
            if name.lower() in {"href", "xlink:href"}:
                assert value.startswith("#")
    style = "".join(one.text for one in tree.iter("style"))
    assert "url(" not in style
    assert "@import" not in style
    assert set(re.findall(r"https?://[^\s\"'<>]+", text)) <= {"http://www.w3.org/2000/svg"}
    policy = tree.find(".//meta[@http-equiv='Content-Security-Policy']").get("content")
    assert policy.startswith("default-src 'none'; style-src 'sha256-")
    assert "unsafe" not in policy


def test_every_link_has_its_target_and_every_id_is_once(tree: etree._Element) -> None:
    ids = [one.get("id") for one in tree.iter() if one.get("id")]
    assert len(ids) == len(set(ids))
    links = [one.get("href")[1:] for one in tree.iter("a")]
    assert len(links) > 15
    assert set(links) <= set(ids)
    for node in tree.iter():
        for name in ("aria-labelledby",):
            if node.get(name):
                assert node.get(name) in ids


def test_well_formed(text: str) -> None:
    reader = parser.HTMLParser()
    parser.document_fromstring(text, parser=reader)
    # libxml2 does not know the elements of HTML 5 and SVG; anything else is a mistake of ours.
    faults = [one.message for one in reader.error_log if one.type_name != "HTML_UNKNOWN_TAG"]
    assert faults == []
    broken = text.replace("</article>", "</div></article>", 1)
    parser.document_fromstring(broken, parser=reader)
    assert [one for one in reader.error_log if one.type_name != "HTML_UNKNOWN_TAG"]


@pytest.mark.parametrize("made", [sample.empty(), sample.clean()], ids=["empty", "clean"])
def test_no_finding_is_never_called_sound(made: Review) -> None:
    said = words(parser.document_fromstring(rendered(made)))
    assert "No finding. That is no proof that the dossier is consistent" in said
    assert sample.CAUTION in said


def test_hostile_text_stays_text() -> None:
    text = rendered(sample.hostile())
    tree = parser.document_fromstring(text)
    assert len(list(tree.iter("script"))) == 1
    assert len(list(tree.iter("style"))) == 1
    for node in tree.iter():
        assert not [name for name in node.attrib if name.startswith("on")]
    assert "<script>alert" not in text
    assert text.count("</script>") == text.count("</style>") == 1
    shown = entities.unescape(text)
    for control in "\u202e\u202c\u200b\x1b":
        assert control not in shown
        assert f"U+{ord(control):04X}" in shown


@settings(max_examples=60, deadline=None)
@given(st.text(st.characters() | st.sampled_from("<>&\"'/-{}%\u202e"), min_size=1))
def test_any_text_is_shown_as_itself(anything: str) -> None:
    exhibit = sample.replace(sample.FINDINGS[4].exhibits[0], text=anything, marks=())
    finding = sample.replace(
        sample.FINDINGS[4], message=anything, exhibits=(exhibit,), rule=anything
    )
    text = rendered(sample.replace(sample.review(), findings=(finding,)))
    tree = parser.document_fromstring(text)
    assert len(list(tree.iter("script"))) == len(list(tree.iter("style"))) == 1
    expected = visible(anything)
    if expected.strip():
        assert "".join(tree.find(".//article//h4").itertext()) == expected
        quoted = tree.find(".//article//figure/p[@translate='no']")
        assert "".join(quoted.itertext()) == expected


def test_finding_on_an_unknown_substance_and_rule_is_still_shown() -> None:
    lone = sample.Review((), (), (), sample.FINDINGS[:1], (), {}, sample.CAUTION)
    tree = parser.document_fromstring(rendered(lone))
    assert tree.find(".//article//h4").text == sample.FINDINGS[0].message


def test_many_substances_take_one_row_each_and_it_is_said() -> None:
    tree = parser.document_fromstring(rendered(sample.many(30), full_substances=20))
    said = words(tree)
    assert "30 substances are too many to be written out with their tables" in said
    assert tree.find(".//table[@class='concordance']") is None
    rows = tree.findall(".//section[@aria-labelledby='concordance']//tbody/tr")
    assert [row[0].text_content() for row in rows] == [f"Substance {n}" for n in range(30)]
    assert [one.text_content() for one in rows[0]][1:8] == ["0", "2", "1", "2", "0", "0", "0"]
    whole = parser.document_fromstring(rendered(sample.many(20), full_substances=20))
    assert len(whole.findall(".//section[@class='substance']")) == 20


def test_findings_past_the_limit_take_one_row_each() -> None:
    tree = parser.document_fromstring(rendered(sample.review(), full_findings=2))
    assert len(list(tree.iter("article"))) == 2
    said = words(tree)
    assert "These 4 take one row each" in said
    for finding in sample.FINDINGS:
        assert finding.message in said
    made = page(document(sample.review()), full_findings=2)
    assert [one["id"] for one in made.brief] == ["F3", "F4", "F5", "F6"]
    assert [one.entry["id"] for one in made.rows] == ["S2"]


def test_wide_concordance_is_cut_into_parts_that_keep_the_reference() -> None:
    evidence, cells = [], []
    for number in range(1, 15):
        one = sample.replace(sample.CLEAN.evidence[1], id=f"E{number}")
        evidence.append(one)
        cells.append(sample.UnitCell(one.id, sample.State.AGREES, "S"))
    row = sample.UnitRow("U1", "centre", (2,), "1", tuple(cells))
    wide = sample.replace(
        sample.CLEAN,
        evidence=tuple(evidence),
        concordance=sample.Concordance("E1", (row,), {}),
    )
    made = page(document(sample.replace(sample.clean(), substances=(wide,))))
    columns = [[one["id"] for one in block.columns] for block in made.substances[0].blocks]
    assert [one[0] for one in columns] == ["E1", "E1", "E1"]
    assert [one for block in columns for one in block[1:]] == [f"E{n}" for n in range(2, 15)]
    tree = parser.document_fromstring(rendered(sample.replace(sample.clean(), substances=(wide,))))
    assert "part 2 of 3" in words(tree)


def test_each_unit_of_a_finding_has_its_derivation_and_the_first_six_their_picture() -> None:
    first, *others = sample.FINDINGS
    drawn = replace(first.exhibits[0], derived=(sample.derived(17),) * 8)
    finding = replace(first, exhibits=(drawn, *first.exhibits[1:]))
    made = parser.document_fromstring(
        rendered(replace(sample.review(), findings=(finding, *others)))
    )
    folds = made.xpath("//article[@id='f1']//details[@class='derived']")
    assert len(folds) == 8
    assert not any("open" in fold.attrib for fold in folds)
    assert [len(fold.findall(".//svg")) for fold in folds] == [1] * 6 + [0] * 2
    for fold in folds:
        assert words(fold.find("summary")) == "Drawing E1, centre at atom 18: R. How it follows"
        steps = [words(step) for step in fold.iter("li")]
        assert steps == list(sample.derived(17).steps)
    assert "first six units only" in words(folds[7])
    assert "first six units only" not in words(folds[5])
