"use strict";
// Sorts, filters, opens and closes what is already on the page; makes no content of its own.
(() => {
  const all = (selector, root = document) => [...root.querySelectorAll(selector)];
  const one = (selector) => document.querySelector(selector);
  const findings = all(".finding");
  const tools = one("#tools");
  const help = one("#help");
  let opened = false;

  const setFolds = (root, open) => all("details", root).forEach((fold) => { fold.open = open; });
  const foldAll = () => {
    opened = !opened;
    setFolds(document, opened);
    const button = one("#fold");
    if (button) button.textContent = opened ? "Close all folds" : "Open all folds";
  };

  const filter = () => {
    const grades = new Set(all("input[name=grade]:checked").map((box) => box.value));
    const words = one("#search").value.toLowerCase().split(/\s+/).filter(Boolean);
    let shown = 0;
    for (const item of findings) {
      const text = words.length ? item.closest(".group").querySelector("h3").textContent + item.textContent : "";
      const fits = grades.has(item.dataset.grade) && words.every((word) => text.toLowerCase().includes(word));
      item.hidden = !fits;
      shown += fits;
    }
    const hidden = findings.length - shown;
    one("#shown").textContent = hidden
      ? `${shown} of ${findings.length} findings shown; ${hidden} hidden by the choice above. Print shows all.`
      : "";
  };

  const move = (step) => {
    const visible = findings.filter((item) => !item.hidden && item.matches("article"));
    if (!visible.length) return;
    const here = visible.indexOf(document.activeElement.closest(".finding"));
    const next = here < 0 ? (step > 0 ? 0 : visible.length - 1) : (here + step + visible.length) % visible.length;
    visible[next].focus({ preventScroll: true });
    visible[next].scrollIntoView({ block: "start" });
  };

  const keys = {
    j: () => move(1),
    k: () => move(-1),
    a: foldAll,
    o: () => {
      const item = document.activeElement.closest(".finding");
      if (item) setFolds(item, !item.querySelector("details[open]"));
    },
    "/": () => tools && one("#search").focus(),
    "?": () => help.showModal(),
  };
  ["critical", "major", "minor", "remark"].forEach((grade, index) => {
    keys[String(index + 1)] = () => {
      const box = one(`input[name=grade][value=${grade}]`);
      if (box) { box.checked = !box.checked; filter(); }
    };
  });
  document.addEventListener("keydown", (event) => {
    const typing = event.target.closest("input[type=search], select, textarea, dialog[open]");
    if (typing || event.ctrlKey || event.metaKey || event.altKey || !keys[event.key]) return;
    event.preventDefault();
    keys[event.key]();
  });

  if (tools) {
    tools.hidden = false;
    all("input[name=grade]").forEach((box) => box.addEventListener("change", filter));
    one("#search").addEventListener("input", filter);
    one("#fold").addEventListener("click", foldAll);
    one("#keys").addEventListener("click", () => help.showModal());
  }

  const compare = new Intl.Collator("en", { numeric: true }).compare;
  const sortBy = (table, column, heading) => {
    const down = heading.getAttribute("aria-sort") === "ascending";
    all("thead th", table).forEach((other) => other.removeAttribute("aria-sort"));
    heading.setAttribute("aria-sort", down ? "descending" : "ascending");
    const text = (row) => (row.cells[column] || row.cells[row.cells.length - 1]).textContent.trim().replace(/,(?=\d{3})/g, "");
    const rows = [...table.tBodies[0].rows].map((row) => [text(row), row]);
    rows.sort((a, b) => (down ? -1 : 1) * compare(a[0], b[0]));
    table.tBodies[0].append(...rows.map((pair) => pair[1]));
  };
  all("table.sortable").forEach((table) => {
    all("thead th", table).forEach((heading, column) => {
      // Not a <button>: browsers leave those out of the headings they repeat on printed pages.
      const button = document.createElement("span");
      button.setAttribute("role", "button");
      button.tabIndex = 0;
      button.textContent = heading.textContent;
      button.addEventListener("click", () => sortBy(table, column, heading));
      button.addEventListener("keydown", (event) => {
        if (event.key !== "Enter" && event.key !== " ") return;
        event.preventDefault();
        sortBy(table, column, heading);
      });
      heading.replaceChildren(button);
    });
  });

  // Browsers that cannot open a closed fold for print by style alone have it opened here.
  const reopened = [];
  addEventListener("beforeprint", () => {
    all("details:not([open])").forEach((fold) => { fold.open = true; reopened.push(fold); });
  });
  addEventListener("afterprint", () => {
    while (reopened.length) reopened.pop().open = false;
  });
})();
