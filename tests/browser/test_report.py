"""The page in a real browser: with and without script, keyboard, print, accessibility, safety.

Uses the distribution's Chromium; skipped with a reason where there is none. Accessibility rules
are those of axe-core (WCAG 2.1 A and AA), as the `axe-playwright-python` package carries it.
"""

import shutil
import subprocess
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pypdfium2
import pytest

from dossiercheck import derive, report
from dossiercheck.report import derivation
from dossiercheck.report.labels import width_of
from tests.unit.report import sample

playwright = pytest.importorskip("playwright.sync_api", reason="playwright is not installed")
CHROMIUM = shutil.which("chromium") or shutil.which("chromium-browser")
pytestmark = pytest.mark.skipif(CHROMIUM is None, reason="no Chromium on this machine")


@pytest.fixture(scope="module")
def browser() -> Iterator[Any]:
    with playwright.sync_playwright() as driver:
        started = driver.chromium.launch(
            executable_path=CHROMIUM, args=["--no-sandbox", "--disable-gpu"]
        )
        yield started
        started.close()


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    made = tmp_path_factory.mktemp("reports")
    for name in ("review", "hostile", "empty", "clean"):
        report.write(getattr(sample, name)(), made / name, ["html"])
    return made


def opened(browser: Any, folder: Path, name: str = "review", **options: Any) -> Any:
    options.setdefault("viewport", {"width": 1200, "height": 900})
    page = browser.new_context(**options).new_page()
    page.errors = []
    page.requests = []
    page.on("pageerror", lambda error: page.errors.append(str(error)))
    page.on("console", lambda said: page.errors.append(said.text) if said.type == "error" else None)
    page.on("request", lambda asked: page.requests.append(asked.url))
    page.goto((folder / name / "report.html").as_uri())
    return page


@pytest.fixture
def page(browser: Any, folder: Path) -> Iterator[Any]:
    made = opened(browser, folder)
    yield made
    assert made.errors == []
    made.context.close()


def test_loads_only_itself_and_reports_no_error(page: Any) -> None:
    assert len(page.requests) == 1
    assert page.requests[0].startswith("file:")


def test_without_script_everything_is_there(browser: Any, folder: Path) -> None:
    page = opened(browser, folder, java_script_enabled=False)
    for finding in sample.FINDINGS:
        assert page.get_by_role("heading", name=finding.message, exact=True).is_visible()
    assert not page.locator("#tools").is_visible()
    assert page.locator("table.concordance").first.is_visible()
    fold = page.locator("article details").first
    assert not fold.locator("li").first.is_visible()
    fold.locator("summary").click()
    assert fold.locator("li").first.is_visible()
    page.context.close()


def test_filter_by_grade_says_what_it_hides(page: Any) -> None:
    cards = page.locator("article.finding")
    assert cards.count() == 6
    page.get_by_label("major").uncheck()
    assert page.locator("article.finding:visible").count() == 3
    assert "3 of 6 findings shown; 3 hidden" in page.locator("#shown").inner_text()
    page.get_by_label("major").check()
    assert page.locator("article.finding:visible").count() == 6
    page.get_by_label("Containing").fill("tartrate maleate")
    assert page.locator("article.finding:visible h4").all_inner_texts() == [
        sample.FINDINGS[5].message
    ]


def test_keys(page: Any) -> None:
    def focused() -> str:
        return page.evaluate("document.activeElement.id")

    page.keyboard.press("j")
    assert focused() == "f1"
    page.keyboard.press("j")
    assert focused() == "f2"
    page.keyboard.press("k")
    assert focused() == "f1"
    page.keyboard.press("o")
    assert page.locator("#f1 details:not([open])").count() == 0
    assert page.locator("#f2 details[open]").count() == 0
    page.keyboard.press("o")
    assert page.locator("#f1 details[open]").count() == 0
    page.keyboard.press("a")
    assert page.locator("details:not([open])").count() == 0
    page.keyboard.press("2")
    assert page.locator("article.finding.major:visible").count() == 0
    page.keyboard.press("?")
    assert page.locator("#help").is_visible()
    page.keyboard.press("Escape")
    assert not page.locator("#help").is_visible()
    page.keyboard.press("/")
    assert focused() == "search"
    page.keyboard.type("j?")
    assert page.locator("#search").input_value() == "j?"


def test_tables_sort_by_their_headings(page: Any) -> None:
    table = page.locator("table.sources")
    sizes = [one.size for one in sample.SOURCES]
    heading = table.get_by_role("button", name="Bytes")
    heading.click()
    shown = [int(one.replace(",", "")) for one in table.locator("td.number").all_inner_texts()]
    assert shown == sorted(sizes)
    heading.focus()
    page.keyboard.press("Enter")
    shown = [int(one.replace(",", "")) for one in table.locator("td.number").all_inner_texts()]
    assert shown == sorted(sizes, reverse=True)
    assert table.locator("th[aria-sort=descending]").count() == 1


def pdf_text(page: Any, target: Path) -> list[str]:
    page.pdf(path=target, prefer_css_page_size=True, print_background=True)
    with pypdfium2.PdfDocument(target) as pdf:
        assert [round(side) for side in pdf[0].get_size()] == [595, 842]  # A4 in points
        return [" ".join(one.get_textpage().get_text_range().split()) for one in pdf]


@pytest.mark.parametrize("script", [True, False], ids=["script", "no-script"])
def test_print_opens_folds_and_repeats_the_caution(
    browser: Any, folder: Path, tmp_path: Path, script: bool
) -> None:
    page = opened(browser, folder, java_script_enabled=script)
    if script:
        page.get_by_label("major").uncheck()
    sheets = pdf_text(page, tmp_path / "out.pdf")
    said = " ".join(sheets)
    for step in sample.FINDINGS[0].derivation:
        assert step.split(":")[0] in said
    for derived in (sample.derived(17), sample.derived(23, 24)):
        for step in derived.steps:
            assert step[:45] in said
    for rule in sample.RULES[:6]:
        assert rule.why[:40] in said
    for finding in sample.FINDINGS:
        assert finding.message[:30] in said
    for reason in sample.OVESTRILIDE.attribution.values():
        assert reason[:12] in said
    # Connection tables would fill most of the paper: their place and drawing stand, and where to
    # find the text.
    assert "M END" not in said
    assert "not printed; it is in findings.json and in the source" in said
    for number, sheet in enumerate(sheets, 1):
        assert "Every finding must be confirmed by a qualified reviewer" in sheet
        assert f"{number} / {len(sheets)}" in sheet
    page.context.close()


def test_headings_of_a_table_are_repeated_on_each_printed_page(
    browser: Any, tmp_path: Path
) -> None:
    report.write(sample.many(300), tmp_path / "many", ["html"])
    page = opened(browser, tmp_path, "many")
    sheets = pdf_text(page, tmp_path / "out.pdf")
    rows = [one for one in sheets if "Substance 1" in one or "Substance 2" in one]
    assert len(rows) > 3
    for sheet in rows:
        assert "First place" in sheet
    page.context.close()


@pytest.mark.parametrize("width", [1200, 390, 320])
def test_no_sideways_scrolling_of_the_page(browser: Any, folder: Path, width: int) -> None:
    for name in ("review", "hostile", "empty"):
        page = opened(browser, folder, name, viewport={"width": width, "height": 800})
        assert page.evaluate("document.documentElement.scrollWidth") <= width, name
        page.context.close()


@pytest.fixture(scope="module")
def derivations(folder: Path) -> Path:
    """Pages of `derive`: a molecule with centres and a double bond; an axis, and what is open."""
    for name, given in (("derived", sample.SMILES), ("axis", "CC=[C@]=CC(C)Cl")):
        (folder / name).mkdir(exist_ok=True)
        (made,) = derivation.printed(derive.answers(given), "html")
        (folder / name / "report.html").write_bytes(made)
    return folder


def test_derivations_are_folded_until_opened(page: Any) -> None:
    fold = page.locator("#f1 details.derived")
    assert fold.count() == 1
    assert not fold.locator("svg").is_visible()
    fold.locator("summary").click()
    assert fold.locator("svg").is_visible()
    assert fold.locator("svg .turn").count() == 2
    assert fold.locator("svg .rank").all_text_contents() == ["a", "b", "c", "d H"]


@pytest.mark.parametrize("width", [1200, 320])
@pytest.mark.parametrize("name", ["derived", "axis"])
def test_a_page_of_derivations(browser: Any, derivations: Path, name: str, width: int) -> None:
    page = opened(browser, derivations, name, viewport={"width": width, "height": 800})
    assert page.locator("svg.structure").first.is_visible()
    assert page.evaluate("document.documentElement.scrollWidth") <= width
    assert page.errors == []
    assert len(page.requests) == 1
    page.context.close()


def test_letters_of_a_derivation_cover_no_other(browser: Any, derivations: Path) -> None:
    """As the browser sets them; the ranks also keep off the bonds."""
    page = opened(browser, derivations, "derived")
    letters, found = page.evaluate(
        """() => {
          const found = [];
          let letters = 0;
          const core = (box) => ({
            left: box.x + box.width * 0.08, right: box.x + box.width * 0.92,
            top: box.y + box.height * 0.25, low: box.y + box.height * 0.75});
          for (const svg of document.querySelectorAll('svg.structure')) {
            for (const mark of svg.querySelectorAll('.sight text')) {
              letters += 1;
              const own = core(mark.getBBox());
              for (const text of svg.querySelectorAll('text')) {
                const other = core(text.getBBox());
                if (text !== mark && own.left < other.right && other.left < own.right
                    && own.top < other.low && other.top < own.low)
                  found.push(mark.textContent + ' on ' + text.textContent);
              }
              if (!mark.classList.contains('rank')) continue;
              for (const path of svg.querySelectorAll('g[stroke-width] path')) {
                for (let at = 0; at <= path.getTotalLength(); at += 1) {
                  const point = path.getPointAtLength(at);
                  if (point.x > own.left && point.x < own.right && point.y > own.top && point.y < own.low) {
                    found.push(mark.textContent + ' on a bond');
                    break;
                  }
                }
              }
            }
          }
          return [letters, found];
        }"""
    )
    assert letters == 40  # in each of five pictures four ranks and four numbers
    assert found == []
    page.context.close()


@pytest.mark.parametrize("scheme", ["light", "dark"])
@pytest.mark.parametrize("name", ["review", "empty", "clean", "derived", "axis"])
def test_accessible(browser: Any, derivations: Path, name: str, scheme: str) -> None:
    axe = pytest.importorskip("axe_playwright_python.sync_playwright")
    page = opened(browser, derivations, name, color_scheme=scheme)
    page.keyboard.press("a")
    tags = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "best-practice"]
    found = axe.Axe().run(page, options={"runOnly": {"type": "tag", "values": tags}}).response
    assert len(found["passes"]) > 15
    faults = [
        (one["id"], [node["html"][:160] for node in one["nodes"][:3]])
        for one in found["violations"]
    ]
    assert faults == []
    page.context.close()


def test_skip_link_leads_to_the_findings(page: Any) -> None:
    page.keyboard.press("Tab")
    assert page.evaluate("document.activeElement.textContent") == "Skip to the findings"
    page.keyboard.press("Enter")
    assert page.evaluate("document.activeElement.id") == "findings"


def test_hostile_text_does_nothing(browser: Any, folder: Path) -> None:
    page = browser.new_context().new_page()
    said: list[str] = []
    page.on("dialog", lambda dialog: (said.append(dialog.message), dialog.dismiss()))
    page.goto((folder / "hostile" / "report.html").as_uri())
    assert page.locator("article.finding").count() == 1
    assert said == []
    # The policy would stop a script even if one got in: this one is put in by force.
    page.evaluate(
        "() => { const s = document.createElement('script'); s.textContent = 'window.bad = 1';"
        " document.body.append(s); }"
    )
    assert page.evaluate("window.bad") is None
    page.context.close()


def test_marks_cover_neither_label_nor_bond(page: Any) -> None:
    """Measured on the letters as the browser sets them, not on our estimate of their widths."""
    overlaps = page.evaluate(
        """() => {
          const found = [];
          let marks = 0;
          for (const svg of document.querySelectorAll('article svg.structure')) {
            for (const mark of svg.querySelectorAll('.marktext text')) {
              marks += 1;
              const box = mark.getBBox();
              const top = box.y + box.height * 0.2, low = box.y + box.height * 0.8;
              for (const text of svg.querySelectorAll('text')) {
                if (text === mark) continue;
                const other = text.getBBox();
                const wide = Math.min(box.x + box.width, other.x + other.width) - Math.max(box.x, other.x);
                const high = Math.min(low, other.y + other.height * 0.8) - Math.max(top, other.y + other.height * 0.2);
                if (wide > 0 && high > 0) found.push(mark.textContent + ' on ' + text.textContent);
              }
              for (const path of svg.querySelectorAll('g[stroke-width] path')) {
                const length = path.getTotalLength();
                for (let at = 0; at <= length; at += 1) {
                  const point = path.getPointAtLength(at);
                  if (point.x > box.x && point.x < box.x + box.width && point.y > top && point.y < low) {
                    found.push(mark.textContent + ' on a bond');
                    break;
                  }
                }
              }
            }
          }
          return [marks, found];
        }"""
    )
    assert overlaps == [7, []]


def test_labels_as_set_stay_close_to_their_estimated_widths(page: Any) -> None:
    """Bonds are drawn back from estimated label widths; a wrong estimate would cut into letters.
    The estimate is Helvetica's: it can be held only against a face of the same metrics."""
    chosen = subprocess.run(["fc-match", "Helvetica"], capture_output=True, text=True, check=True)
    if not any(face in chosen.stdout for face in ("Liberation", "Helvetica", "Arial", "Nimbus")):
        pytest.skip(f"no face with Helvetica's metrics here, only {chosen.stdout.strip()}")
    widths = page.evaluate(
        """() => [...document.querySelectorAll('svg.structure text')].map(
             (text) => [text.textContent, text.getComputedTextLength(), text.getAttribute('font-size')
               || text.parentNode.getAttribute('font-size')])"""
    )
    assert len(widths) > 30
    for text, measured, size in widths:
        assert width_of(text, float(size)) == pytest.approx(measured, abs=0.18 * measured + 0.5), (
            text
        )
