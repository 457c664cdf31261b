"""HTML pages and XHTML documents: the text as it is shown, its headings and tables.

Scripts are not run and nothing is loaded. What a page holds and does not show, and what it shows
that is no text (pictures, drawings, frames), is listed as unread at its place.
"""

from __future__ import annotations

import codecs
import re
from collections.abc import Iterator

from lxml import etree

from dossiercheck.limits import Refused, decode
from dossiercheck.model import Item, Source, Unread
from dossiercheck.readers.content import guarded, whole
from dossiercheck.readers.htmlpage import Page
from dossiercheck.readers.htmlstyle import read_sheets, tag_of

SUFFIXES = frozenset({".html", ".htm", ".xhtml"})

LONGEST = 10_000_000  # characters: the parser needs some 50 times as much memory
XHTML = "http://www.w3.org/1999/xhtml"
_DECLARED = re.compile(
    rb"""(?:<meta[^>]{0,300}?charset\s*=\s*["']?\s*|<\?xml[^>]{0,99}?encoding\s*=\s*["'])"""
    rb"""([A-Za-z0-9._:\-]{1,40})""",
    re.IGNORECASE,
)
# Browsers take these two labels for Windows-1252 (WHATWG Encoding Standard, section 4.2).
_AS_WINDOWS = {"iso-8859-1", "latin1", "us-ascii", "ascii"}
_ENCODINGS = re.compile(
    r"utf-?8|utf-?16(?:le|be)?|iso-8859-\d\d?|windows-125\d|cp125\d|koi8-[ru]|shift_jis|euc-jp"
    r"|euc-kr|gb2312|gbk|gb18030|big5|tis-620"
)


@guarded("")
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield passages and tables in the order of the page, with what is not read among them."""
    text = _text(data)
    if len(text) > LONGEST:
        raise Refused("size-budget", f"The page has {len(text)} characters.")
    if "<!ENTITY" in text:
        raise Refused("entities", "The page declares entities.")
    if not text.strip():
        raise Refused("empty", "The page has no text.")
    parser = etree.HTMLParser(
        encoding="utf-8", no_network=True, remove_comments=True, remove_pis=True
    )
    try:
        root = etree.fromstring(_without_declaration(text).encode(), parser)
    except (etree.XMLSyntaxError, ValueError) as error:
        raise Refused("damaged-html", f"The page does not parse: {error}.") from error
    # The parser mends what it can and goes on; past a budget of its own it drops the rest.
    fatal = next((one for one in parser.error_log if one.level_name == "FATAL"), None)
    if fatal is not None:
        raise Refused("size-budget", f"The page is past what the parser takes: {fatal.message}.")
    if root is None:
        raise Refused("empty", "The page has no content.")
    lower = text.lower()
    if "<html" in lower and "</html" not in lower:
        yield whole(source, "truncated", "The page is not closed: its end may be missing.")
    _part_terms(root)
    yield from read_root(source, root)


def _part_terms(root: etree._Element) -> None:
    """A term or definition ends where the next begins; the parser puts the next into it."""
    for tag in ("dt", "dd"):
        for inner in list(root.iter(tag)):
            outer = inner.getparent()
            while outer is not None and outer.tag not in ("dl", "dt", "dd"):
                outer = outer.getparent()
            if outer is not None and outer.tag != "dl":
                outer.addnext(inner)


def read_root(source: Source, root: etree._Element) -> Iterator[Item]:
    """As `read`, from the root of a parsed document."""
    sheets = ["".join(map(str, one.itertext())) for one in root.iter(etree.Element) if _styles(one)]
    sheet = read_sheets(sheets)
    page = Page(source.path, sheet)
    scripts = 0
    for element in root.iter(etree.Element):
        tag = tag_of(element)
        scripts += tag == "script"
        if tag == "link" and "stylesheet" in (element.get("rel") or "").lower():
            where = element.get("href") or "without an address"
            detail = f"The style sheet {where} is not loaded; what it hides is read as shown."
            yield Unread(page.place(element), "style-sheet", detail)
    for selector in sheet.doubtful:
        detail = f"A style hides “{selector[:200]}” at times; it is read as shown."
        yield whole(source, "style-sheet", detail)
    yield from page.read(root)
    if scripts and not page.said:
        detail = "The page has no text of its own; scripts, which are not run, may make it."
        yield whole(source, "script", detail)


def _styles(element: etree._Element) -> bool:
    return tag_of(element) == "style"


def _text(data: bytes) -> str:
    """The page's text by byte-order mark, else as it declares, else as `limits.decode` finds."""
    declared = _DECLARED.search(data[:4096])
    if not declared or data.startswith((codecs.BOM_UTF8, b"\xff\xfe", b"\xfe\xff")):
        return decode(data)[0]
    label = declared[1].decode("ascii").lower()
    if label in _AS_WINDOWS:
        label = "windows-1252"
    if not _ENCODINGS.fullmatch(label):
        raise Refused("encoding", f"A page in the encoding {label} is not read.")
    if label.startswith("utf-16") or label.startswith("utf16"):
        label = "utf-8"  # it was found by reading bytes as ASCII, so it cannot be true
    try:
        text = data.decode(label)
    except UnicodeDecodeError as error:
        detail = f"Byte {error.start + 1} is not valid in {label}, as the page is declared."
        raise Refused("encoding", detail) from error
    if "\0" in text:
        raise Refused("binary", "The content has NUL characters.")
    return text


def _without_declaration(text: str) -> str:
    return re.sub(r"^\ufeff?\s*<\?xml[^>]*\?>", "", text)
