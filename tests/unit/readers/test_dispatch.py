"""Which format's module a shared suffix is handed on to, and what the guards refuse."""

from __future__ import annotations

import pytest

from dossiercheck.limits import Refused, parse_xml
from dossiercheck.model import Place
from dossiercheck.readers.jsontext import parse_json
from dossiercheck.readers.xmlpath import path_of
from tests.unit.readers.reading import read, reasons, unread


@pytest.mark.parametrize(
    ("name", "data", "reason"),
    [
        ("a.xml", b"", "empty"),
        ("a.xml", b"<other/>", "no-reader"),
        ("a.xml", b'<document xmlns="urn:elsewhere"/>', "no-reader"),
        ("a.xml", b'<!DOCTYPE other SYSTEM "http://example.com/x.dtd"><other/>', "no-reader"),
        ("a.xml", b"<other>", "damaged-xml"),
        ("a.xml", b"<!DOCTYPE a [<!ENTITY b 'c'>]><a>&b;</a>", "entities"),
        ("a.xml", b'<?xml version="1.0" encoding="utf-7"?><a/>', "encoding"),
        ("a.xml", b"<a>" * 300 + b"</a>" * 300, "damaged-xml"),
        ("a.xml", b"%PDF-1.4", "content-mismatch"),
        ("a.json", b"", "empty"),
        ("a.json", b"[]", "empty"),
        ("a.json", b"3", "no-reader"),
        ("a.json", b'{"a": 1}', "no-reader"),
        ("a.json", b'{"a": 1', "damaged-json"),
        ("a.json", b'{"a": 1} {"a": 2}', "damaged-json"),
        ("a.json", b'{"a": NaN}', "damaged-json"),
        ("a.json", b'{"a": 1, "b": 2, "a": 3}', "duplicate-key"),
        ("a.json", b"[" * 300 + b"]" * 300, "too-deep"),
        ("a.json", b"[" * 200_000, "too-deep"),
        ("a.json", rb'{"a": "\ud800"}', "encoding"),
        ("a.json", rb'{"a\u0000": 1}', "binary"),
        ("a.json", b"PK\x03\x04", "content-mismatch"),
        ("a.jsonl", b"\n \n", "empty"),
    ],
)
def test_what_is_not_read_says_why(name: str, data: bytes, reason: str) -> None:
    assert reasons(read(name, data)) == [reason]


def test_a_damaged_line_does_not_take_the_others_along() -> None:
    entries = unread(read("a.jsonl", b'{"a": 1}\r\n{"a":\r\n\r\n"x"\n{"b": "\xe2\x80\xa8"}'))
    assert [(entry.reason, entry.place.line) for entry in entries] == [
        ("no-reader", 1),
        ("damaged-json", 2),
        ("no-reader", 4),
        ("no-reader", 5),
    ]


def test_each_entry_of_an_array_is_looked_at_for_itself() -> None:
    entries = unread(read("a.json", b'[{"a": 1}, 2]'))
    assert [entry.place for entry in entries] == [
        Place("a.json", path="$[0]"),
        Place("a.json", path="$[1]"),
    ]
    assert str(entries[1].place) == "at $[1]"


def test_numbers_keep_the_digits_that_are_printed() -> None:
    assert parse_json('[913.030, 1e3, 7, "7", true, null]') == [
        "913.030",
        "1e3",
        "7",
        "7",
        True,
        None,
    ]


def test_a_surrogate_pair_is_one_character() -> None:
    assert parse_json(r'"\ud835\udc45"') == "\U0001d445"


def test_a_number_of_ten_thousand_digits_is_text_like_any_other() -> None:
    assert parse_json("9" * 10_000) == "9" * 10_000


def test_an_xml_path_counts_siblings_of_one_name() -> None:
    root = parse_xml(b'<a xmlns="urn:x"><b/><c/><b><d/></b></a>')
    assert path_of(root) == "/a"
    assert path_of(root[1]) == "/a/c"
    assert path_of(root[2][0]) == "/a/b[2]/d"
    assert path_of(root[2][0], root[2], "/a/b[2]") == "/a/b[2]/d"


def test_entities_in_utf_16_are_refused_too() -> None:
    text = '<?xml version="1.0" encoding="utf-16"?><!DOCTYPE a [<!ENTITY b "c">]><a>&b;</a>'
    with pytest.raises(Refused, match="entities"):
        parse_xml(text.encode("utf-16"), doctype=True)
