"""`report.html`: the document as one page that needs nothing but itself.

The page carries a content security policy that admits its own style and script by their hashes
and nothing else: no request leaves it, and no text of a dossier can run or restyle it.
"""

from __future__ import annotations

import re
from base64 import b64encode
from functools import lru_cache
from hashlib import sha256
from pathlib import Path
from typing import Any

from jinja2 import Environment, FileSystemLoader, StrictUndefined
from markupsafe import Markup, escape

from dossiercheck import assets
from dossiercheck.model import Drawing, DrawnAtom, DrawnBond
from dossiercheck.report.depict import svg
from dossiercheck.report.derived import heading, sight_of
from dossiercheck.report.document import Json
from dossiercheck.report.verdict import number_of
from dossiercheck.report.view import FULL_FINDINGS, FULL_SUBSTANCES, is_long, page
from dossiercheck.report.visible import runs, visible

FILE = "report.html"

# Hyphen-minus, the hyphens and dashes of Unicode's general punctuation, and the minus sign.
_HYPHEN = re.compile("[-\u2010-\u2013\u2212]")

_TEMPLATE, _STYLE, _SCRIPT = "report.html.j2", "report.css", "report.js"
_DERIVATIONS = "derivations.html.j2"


def render(
    document: Json, full_findings: int = FULL_FINDINGS, full_substances: int = FULL_SUBSTANCES
) -> bytes:
    """The page as UTF-8; the same bytes for the same document."""
    folder = assets.templates()
    style = (folder / _STYLE).read_text(encoding="utf-8")
    script = (folder / _SCRIPT).read_text(encoding="utf-8")
    text = (
        _environment(folder)
        .get_template(_TEMPLATE)
        .render(
            document=document,
            page=page(document, full_findings, full_substances),
            policy=_policy(style, script),
            style=Markup(style),
            script=Markup(script),
        )
    )
    return text.encode("utf-8")


def derivations(records: list[Json]) -> bytes:
    """A page of derivations, with the report's style and no script; for `derive`."""
    folder = assets.templates()
    style = (folder / _STYLE).read_text(encoding="utf-8")
    policy = f"default-src 'none'; style-src '{_hash(style)}'; base-uri 'none'; form-action 'none'"
    template = _environment(folder).get_template(_DERIVATIONS)
    return template.render(records=records, policy=policy, style=Markup(style)).encode("utf-8")


@lru_cache(maxsize=4)
def _environment(folder: Path) -> Environment:
    """The templates of that folder, compiled once."""
    environment = Environment(
        loader=FileSystemLoader(folder),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
        keep_trailing_newline=True,
        finalize=_shown,
    )
    environment.filters.update(
        verbatim=_verbatim,
        structure=_structure,
        sighted=_sighted,
        heading=heading,
        number_of=number_of,
        thousands=_thousands,
    )
    environment.tests["long"] = is_long
    return environment


def _policy(style: str, script: str) -> str:
    return (
        f"default-src 'none'; style-src '{_hash(style)}'; script-src '{_hash(script)}'; "
        "base-uri 'none'; form-action 'none'"
    )


def _hash(text: str) -> str:
    """The source hash of Content Security Policy Level 3, section 2.3.1."""
    return "sha256-" + b64encode(sha256(text.encode("utf-8")).digest()).decode("ascii")


def _shown(value: Any) -> Any:
    """What every expression of the template passes through before it is escaped."""
    return visible(value) if isinstance(value, str) and not isinstance(value, Markup) else value


def _thousands(value: int) -> str:
    return f"{value:,}"


def _verbatim(text: str, marks: list[list[int]] | None = None, breaks: bool = True) -> Markup:
    """The text as it stands, what matters in `<mark>`, hidden characters as code points.

    With `breaks` a line may end after any hyphen: a browser left alone does not end one between
    a hyphen and a digit, and would cut a long name in the middle of a word.
    """
    parts = []
    for piece, marked, hidden in runs(text, marks or []):
        shown = escape(piece)
        if hidden:
            shown = Markup('<span class="codepoint">{}</span>').format(piece)
        elif breaks:
            shown = Markup(_HYPHEN.sub(r"\g<0><wbr>", str(shown)))
        parts.append(Markup("<mark>{}</mark>").format(shown) if marked else shown)
    return Markup("").join(parts)


def _structure(drawing: Json, title: str) -> Markup:
    return Markup(svg(_drawing(drawing), title))


def _sighted(drawing: Json, sight: Json, title: str) -> Markup:
    """The drawing with one unit marked as its derivation reads it."""
    return Markup(svg(_drawing(drawing), title, sight_of(sight)))


def _drawing(drawing: Json) -> Drawing:
    """The drawing's data types again, from the document's rows."""
    texts = {one["atom"]: one["text"] for one in drawing["marked_atoms"]}
    thick = set(drawing["marked_bonds"])
    nan = float("nan")
    atoms = tuple(
        DrawnAtom(
            nan if x is None else x,
            nan if y is None else y,
            element,
            charge,
            hydrogens,
            isotope,
            at in texts,
            texts.get(at, ""),
        )
        for at, (element, x, y, charge, hydrogens, isotope) in enumerate(drawing["atoms"])
    )
    bonds = tuple(
        DrawnBond(begin, end, order, style, at in thick)
        for at, (begin, end, order, style) in enumerate(drawing["bonds"])
    )
    return Drawing(atoms, bonds, drawing["laid_out"])
