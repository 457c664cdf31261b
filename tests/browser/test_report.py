["fc-match", "Helvetica"]""The page in a real browser: with and without script, keyboard, print, accessibility, safety.

Us["fc-match", "Helvetica"]s the distribution's Chromium; skipped with a reason where there is none. Accessibility rules
["fc-match", "Helvetica"]re those of axe-core (WCAG 2.1 A and AA), as the `axe-playwright-python` package carries it.
["fc-match", "Helvetica"]""

["fc-match", "Helvetica"]mport shutil
["fc-match", "Helvetica"]mport subprocess
["fc-match", "Helvetica"]rom collections.abc import Iterator
["fc-match", "Helvetica"]rom pathlib import Path
["fc-match", "Helvetica"]rom typing import Any

["fc-match", "Helvetica"]mport pypdfium2
["fc-match", "Helvetica"]mport pytest

["fc-match", "Helvetica"]rom dossiercheck import report
["fc-match", "Helvetica"]rom dossiercheck.report.labels import width_of
["fc-match", "Helvetica"]rom tests.unit.report import sample

p["fc-match", "Helvetica"]aywright = pytest.importorskip("playwright.sync_api", reason="playwright is not installed")
C["fc-match", "Helvetica"]ROMIUM = shutil.which("chromium") or shutil.which("chromium-browser")
py["fc-match", "Helvetica"]estmark = pytest.mark.skipif(CHROMIUM is None, reason="no Chromium on this machine")


@py["fc-match", "Helvetica"]est.fixture(scope="module")
["fc-match", "Helvetica"]ef browser() -> Iterator[Any]:
["fc-match", "Helvetica"]   with playwright.sync_playwright() as driver:
["fc-match", "Helvetica"]       started = driver.chromium.launch(
["fc-match", "Helvetica"]           executable_path=CHROMIUM, args=["--no-sandbox", "--disable-gpu"]
["fc-match", "Helvetica"]       )
["fc-match", "Helvetica"]       yield started
["fc-match", "Helvetica"]       started.close()


@py["fc-match", "Helvetica"]est.fixture(scope="module")
["fc-match", "Helvetica"]ef folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
["fc-match", "Helvetica"]   made = tmp_path_factory.mktemp("reports")
["fc-match", "Helvetica"]   for name in ("review", "hostile", "empty", "clean"):
["fc-match", "Helvetica"]       report.write(getattr(sample, name)(), made / name, ["html"])
["fc-match", "Helvetica"]   return made


["fc-match", "Helvetica"]ef opened(browser: Any, folder: Path, name: str = "review", **options: Any) -> Any:
["fc-match", "Helvetica"]   options.setdefault("viewport", {"width": 1200, "height": 900})
["fc-match", "Helvetica"]   page = browser.new_context(**options).new_page()
["fc-match", "Helvetica"]   page.errors = []
["fc-match", "Helvetica"]   page.requests = []
["fc-match", "Helvetica"]   page.on("pageerror", lambda error: page.errors.append(str(error)))
["fc-match", "Helvetica"]   page.on("console", lambda said: page.errors.append(said.text) if said.type == "error" else None)
["fc-match", "Helvetica"]   page.on("request", lambda asked: page.requests.append(asked.url))
["fc-match", "Helvetica"]   page.goto((folder / name / "report.html").as_uri())
["fc-match", "Helvetica"]   return page


@py["fc-match", "Helvetica"]est.fixture
["fc-match", "Helvetica"]ef page(browser: Any, folder: Path) -> Iterator[Any]:
["fc-match", "Helvetica"]   made = opened(browser, folder)
["fc-match", "Helvetica"]   yield made
["fc-match", "Helvetica"]   assert made.errors == []
["fc-match", "Helvetica"]   made.context.close()


["fc-match", "Helvetica"]ef test_loads_only_itself_and_reports_no_error(page: Any) -> None:
["fc-match", "Helvetica"]   assert len(page.requests) == 1
["fc-match", "Helvetica"]   assert page.requests[0].startswith("file:")


["fc-match", "Helvetica"]ef test_without_script_everything_is_there(browser: Any, folder: Path) -> None:
["fc-match", "Helvetica"]   page = opened(browser, folder, java_script_enabled=False)
["fc-match", "Helvetica"]   for finding in sample.FINDINGS:
["fc-match", "Helvetica"]       assert page.get_by_role("heading", name=finding.message, exact=True).is_visible()
["fc-match", "Helvetica"]   assert not page.locator("#tools").is_visible()
["fc-match", "Helvetica"]   assert page.locator("table.concordance").first.is_visible()
["fc-match", "Helvetica"]   fold = page.locator("article details").first
["fc-match", "Helvetica"]   assert not fold.locator("li").first.is_visible()
["fc-match", "Helvetica"]   fold.locator("summary").click()
["fc-match", "Helvetica"]   assert fold.locator("li").first.is_visible()
["fc-match", "Helvetica"]   page.context.close()


["fc-match", "Helvetica"]ef test_filter_by_grade_says_what_it_hides(page: Any) -> None:
["fc-match", "Helvetica"]   cards = page.locator("article.finding")
["fc-match", "Helvetica"]   assert cards.count() == 6
["fc-match", "Helvetica"]   page.get_by_label("major").uncheck()
["fc-match", "Helvetica"]   assert page.locator("article.finding:visible").count() == 3
["fc-match", "Helvetica"]   assert "3 of 6 findings shown; 3 hidden" in page.locator("#shown").inner_text()
["fc-match", "Helvetica"]   page.get_by_label("major").check()
["fc-match", "Helvetica"]   assert page.locator("article.finding:visible").count() == 6
["fc-match", "Helvetica"]   page.get_by_label("Containing").fill("tartrate maleate")
["fc-match", "Helvetica"]   assert page.locator("article.finding:visible h4").all_inner_texts() == [
["fc-match", "Helvetica"]       sample.FINDINGS[5].message
["fc-match", "Helvetica"]   ]


["fc-match", "Helvetica"]ef test_keys(page: Any) -> None:
["fc-match", "Helvetica"]   def focused() -> str:
["fc-match", "Helvetica"]       return page.evaluate("document.activeElement.id")

["fc-match", "Helvetica"]   page.keyboard.press("j")
["fc-match", "Helvetica"]   assert focused() == "f1"
["fc-match", "Helvetica"]   page.keyboard.press("j")
["fc-match", "Helvetica"]   assert focused() == "f2"
["fc-match", "Helvetica"]   page.keyboard.press("k")
["fc-match", "Helvetica"]   assert focused() == "f1"
["fc-match", "Helvetica"]   page.keyboard.press("o")
["fc-match", "Helvetica"]   assert page.locator("#f1 details:not([open])").count() == 0
["fc-match", "Helvetica"]   assert page.locator("#f2 details[open]").count() == 0
["fc-match", "Helvetica"]   page.keyboard.press("o")
["fc-match", "Helvetica"]   assert page.locator("#f1 details[open]").count() == 0
["fc-match", "Helvetica"]   page.keyboard.press("a")
["fc-match", "Helvetica"]   assert page.locator("details:not([open])").count() == 0
["fc-match", "Helvetica"]   page.keyboard.press("2")
["fc-match", "Helvetica"]   assert page.locator("article.finding.major:visible").count() == 0
["fc-match", "Helvetica"]   page.keyboard.press("?")
["fc-match", "Helvetica"]   assert page.locator("#help").is_visible()
["fc-match", "Helvetica"]   page.keyboard.press("Escape")
["fc-match", "Helvetica"]   assert not page.locator("#help").is_visible()
["fc-match", "Helvetica"]   page.keyboard.press("/")
["fc-match", "Helvetica"]   assert focused() == "search"
["fc-match", "Helvetica"]   page.keyboard.type("j?")
["fc-match", "Helvetica"]   assert page.locator("#search").input_value() == "j?"


["fc-match", "Helvetica"]ef test_tables_sort_by_their_headings(page: Any) -> None:
["fc-match", "Helvetica"]   table = page.locator("table.sources")
["fc-match", "Helvetica"]   sizes = [one.size for one in sample.SOURCES]
["fc-match", "Helvetica"]   heading = table.get_by_role("button", name="Bytes")
["fc-match", "Helvetica"]   heading.click()
["fc-match", "Helvetica"]   shown = [int(one.replace(",", "")) for one in table.locator("td.number").all_inner_texts()]
["fc-match", "Helvetica"]   assert shown == sorted(sizes)
["fc-match", "Helvetica"]   heading.focus()
["fc-match", "Helvetica"]   page.keyboard.press("Enter")
["fc-match", "Helvetica"]   shown = [int(one.replace(",", "")) for one in table.locator("td.number").all_inner_texts()]
["fc-match", "Helvetica"]   assert shown == sorted(sizes, reverse=True)
["fc-match", "Helvetica"]   assert table.locator("th[aria-sort=descending]").count() == 1


["fc-match", "Helvetica"]ef pdf_text(page: Any, target: Path) -> list[str]:
["fc-match", "Helvetica"]   page.pdf(path=target, prefer_css_page_size=True, print_background=True)
["fc-match", "Helvetica"]   with pypdfium2.PdfDocument(target) as pdf:
["fc-match", "Helvetica"]       assert [round(side) for side in pdf[0].get_size()] == [595, 842]  # A4 in points
["fc-match", "Helvetica"]       return [" ".join(one.get_textpage().get_text_range().split()) for one in pdf]


@py["fc-match", "Helvetica"]est.mark.parametrize("script", [True, False], ids=["script", "no-script"])
["fc-match", "Helvetica"]ef test_print_opens_folds_and_repeats_the_caution(
["fc-match", "Helvetica"]   browser: Any, folder: Path, tmp_path: Path, script: bool
)["fc-match", "Helvetica"]-> None:
["fc-match", "Helvetica"]   page = opened(browser, folder, java_script_enabled=script)
["fc-match", "Helvetica"]   if script:
["fc-match", "Helvetica"]       page.get_by_label("major").uncheck()
["fc-match", "Helvetica"]   sheets = pdf_text(page, tmp_path / "out.pdf")
["fc-match", "Helvetica"]   said = " ".join(sheets)
["fc-match", "Helvetica"]   for step in sample.FINDINGS[0].derivation:
["fc-match", "Helvetica"]       assert step.split(":")[0] in said
["fc-match", "Helvetica"]   for rule in sample.RULES[:6]:
["fc-match", "Helvetica"]       assert rule.why[:40] in said
["fc-match", "Helvetica"]   for finding in sample.FINDINGS:
["fc-match", "Helvetica"]       assert finding.message[:30] in said
["fc-match", "Helvetica"]   for reason in sample.OVESTRILIDE.attribution.values():
["fc-match", "Helvetica"]       assert reason[:12] in said
["fc-match", "Helvetica"]   # Connection tables would fill most of the paper: their place and drawing stand, and where to
["fc-match", "Helvetica"]   # find the text.
["fc-match", "Helvetica"]   assert "M END" not in said
["fc-match", "Helvetica"]   assert "not printed; it is in findings.json and in the source" in said
["fc-match", "Helvetica"]   for number, sheet in enumerate(sheets, 1):
["fc-match", "Helvetica"]       assert "Every finding must be confirmed by a qualified reviewer" in sheet
["fc-match", "Helvetica"]       assert f"{number} / {len(sheets)}" in sheet
["fc-match", "Helvetica"]   page.context.close()


["fc-match", "Helvetica"]ef test_headings_of_a_table_are_repeated_on_each_printed_page(
["fc-match", "Helvetica"]   browser: Any, tmp_path: Path
)["fc-match", "Helvetica"]-> None:
["fc-match", "Helvetica"]   report.write(sample.many(300), tmp_path / "many", ["html"])
["fc-match", "Helvetica"]   page = opened(browser, tmp_path, "many")
["fc-match", "Helvetica"]   sheets = pdf_text(page, tmp_path / "out.pdf")
["fc-match", "Helvetica"]   rows = [one for one in sheets if "Substance 1" in one or "Substance 2" in one]
["fc-match", "Helvetica"]   assert len(rows) > 3
["fc-match", "Helvetica"]   for sheet in rows:
["fc-match", "Helvetica"]       assert "First place" in sheet
["fc-match", "Helvetica"]   page.context.close()


@py["fc-match", "Helvetica"]est.mark.parametrize("width", [1200, 390, 320])
["fc-match", "Helvetica"]ef test_no_sideways_scrolling_of_the_page(browser: Any, folder: Path, width: int) -> None:
["fc-match", "Helvetica"]   for name in ("review", "hostile", "empty"):
["fc-match", "Helvetica"]       page = opened(browser, folder, name, viewport={"width": width, "height": 800})
["fc-match", "Helvetica"]       assert page.evaluate("document.documentElement.scrollWidth") <= width, name
["fc-match", "Helvetica"]       page.context.close()


@py["fc-match", "Helvetica"]est.mark.parametrize("scheme", ["light", "dark"])
@py["fc-match", "Helvetica"]est.mark.parametrize("name", ["review", "empty", "clean"])
["fc-match", "Helvetica"]ef test_accessible(browser: Any, folder: Path, name: str, scheme: str) -> None:
["fc-match", "Helvetica"]   axe = pytest.importorskip("axe_playwright_python.sync_playwright")
["fc-match", "Helvetica"]   page = opened(browser, folder, name, color_scheme=scheme)
["fc-match", "Helvetica"]   page.keyboard.press("a")
["fc-match", "Helvetica"]   tags = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "best-practice"]
["fc-match", "Helvetica"]   found = axe.Axe().run(page, options={"runOnly": {"type": "tag", "values": tags}}).response
["fc-match", "Helvetica"]   assert len(found["passes"]) > 15
["fc-match", "Helvetica"]   faults = [
["fc-match", "Helvetica"]       (one["id"], [node["html"][:160] for node in one["nodes"][:3]])
["fc-match", "Helvetica"]       for one in found["violations"]
["fc-match", "Helvetica"]   ]
["fc-match", "Helvetica"]   assert faults == []
["fc-match", "Helvetica"]   page.context.close()


["fc-match", "Helvetica"]ef test_skip_link_leads_to_the_findings(page: Any) -> None:
["fc-match", "Helvetica"]   page.keyboard.press("Tab")
["fc-match", "Helvetica"]   assert page.evaluate("document.activeElement.textContent") == "Skip to the findings"
["fc-match", "Helvetica"]   page.keyboard.press("Enter")
["fc-match", "Helvetica"]   assert page.evaluate("document.activeElement.id") == "findings"


["fc-match", "Helvetica"]ef test_hostile_text_does_nothing(browser: Any, folder: Path) -> None:
["fc-match", "Helvetica"]   page = browser.new_context().new_page()
["fc-match", "Helvetica"]   said: list[str] = []
["fc-match", "Helvetica"]   page.on("dialog", lambda dialog: (said.append(dialog.message), dialog.dismiss()))
["fc-match", "Helvetica"]   page.goto((folder / "hostile" / "report.html").as_uri())
["fc-match", "Helvetica"]   assert page.locator("article.finding").count() == 1
["fc-match", "Helvetica"]   assert said == []
["fc-match", "Helvetica"]   # The policy would stop a script even if one got in: this one is put in by force.
["fc-match", "Helvetica"]   page.evaluate(
["fc-match", "Helvetica"]       "() => { const s = document.createElement('script'); s.textContent = 'window.bad = 1';"
["fc-match", "Helvetica"]       " document.body.append(s); }"
["fc-match", "Helvetica"]   )
["fc-match", "Helvetica"]   assert page.evaluate("window.bad") is None
["fc-match", "Helvetica"]   page.context.close()


["fc-match", "Helvetica"]ef test_marks_cover_neither_label_nor_bond(page: Any) -> None:
["fc-match", "Helvetica"]   """Measured on the letters as the browser sets them, not on our estimate of their widths."""
["fc-match", "Helvetica"]   overlaps = page.evaluate(
["fc-match", "Helvetica"]       """() => {
["fc-match", "Helvetica"]         const found = [];
["fc-match", "Helvetica"]         let marks = 0;
["fc-match", "Helvetica"]         for (const svg of document.querySelectorAll('article svg.structure')) {
["fc-match", "Helvetica"]           for (const mark of svg.querySelectorAll('.marktext text')) {
["fc-match", "Helvetica"]             marks += 1;
["fc-match", "Helvetica"]             const box = mark.getBBox();
["fc-match", "Helvetica"]             const top = box.y + box.height * 0.2, low = box.y + box.height * 0.8;
["fc-match", "Helvetica"]             for (const text of svg.querySelectorAll('text')) {
["fc-match", "Helvetica"]               if (text === mark) continue;
["fc-match", "Helvetica"]               const other = text.getBBox();
["fc-match", "Helvetica"]               const wide = Math.min(box.x + box.width, other.x + other.width) - Math.max(box.x, other.x);
["fc-match", "Helvetica"]               const high = Math.min(low, other.y + other.height * 0.8) - Math.max(top, other.y + other.height * 0.2);
["fc-match", "Helvetica"]               if (wide > 0 && high > 0) found.push(mark.textContent + ' on ' + text.textContent);
["fc-match", "Helvetica"]             }
["fc-match", "Helvetica"]             for (const path of svg.querySelectorAll('g[stroke-width] path')) {
["fc-match", "Helvetica"]               const length = path.getTotalLength();
["fc-match", "Helvetica"]               for (let at = 0; at <= length; at += 1) {
["fc-match", "Helvetica"]                 const point = path.getPointAtLength(at);
["fc-match", "Helvetica"]                 if (point.x > box.x && point.x < box.x + box.width && point.y > top && point.y < low) {
["fc-match", "Helvetica"]                   found.push(mark.textContent + ' on a bond');
["fc-match", "Helvetica"]                   break;
["fc-match", "Helvetica"]                 }
["fc-match", "Helvetica"]               }
["fc-match", "Helvetica"]             }
["fc-match", "Helvetica"]           }
["fc-match", "Helvetica"]         }
["fc-match", "Helvetica"]         return [marks, found];
["fc-match", "Helvetica"]       }"""
["fc-match", "Helvetica"]   )
["fc-match", "Helvetica"]   assert overlaps == [7, []]


["fc-match", "Helvetica"]ef test_labels_as_set_stay_close_to_their_estimated_widths(page: Any) -> None:
["fc-match", "Helvetica"]   """Bonds are drawn back from estimated label widths; a wrong estimate would cut into letters.
["fc-match", "Helvetica"]   The estimate is Helvetica's: it can be held only against a face of the same metrics."""
["fc-match", "Helvetica"]   chosen = subprocess.run(["fc-match", "Helvetica"], capture_output=True, text=True, check=True)
["fc-match", "Helvetica"]   if not any(face in chosen.stdout for face in ("Liberation", "Helvetica", "Arial", "Nimbus")):
["fc-match", "Helvetica"]       pytest.skip(f"no face with Helvetica's metrics here, only {chosen.stdout.strip()}")
["fc-match", "Helvetica"]   widths = page.evaluate(
["fc-match", "Helvetica"]       """() => [...document.querySelectorAll('svg.structure text')].map(
["fc-match", "Helvetica"]            (text) => [text.textContent, text.getComputedTextLength(), text.getAttribute('font-size')
["fc-match", "Helvetica"]              || text.parentNode.getAttribute('font-size')])"""
["fc-match", "Helvetica"]   )
["fc-match", "Helvetica"]   assert len(widths) > 30
["fc-match", "Helvetica"]   for text, measured, size in widths:
["fc-match", "Helvetica"]       assert width_of(text, float(size)) == pytest.approx(measured, abs=0.18 * measured + 0.5), (
["fc-match", "Helvetica"]           text
["fc-match", "Helvetica"]       )
