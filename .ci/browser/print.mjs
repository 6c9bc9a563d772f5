// Where the parts of a page fall when it is printed. Tiny words are set into the
// page at the start and the end of each table, row and figure, in each heading and
// in what follows it; in the print's text they tell the sheet they are on.

// mark sets the words in and says what each pair stands for, and whether the page
// calls itself SIMULATED.
export async function mark(tab) {
  return tab.evaluate(() => {
    const marks = [];
    const word = (into, text, first) => {
      const s = document.createElement("span");
      s.textContent = text;
      s.style.cssText = "position:absolute;font:1px sans-serif;white-space:nowrap;color:#000";
      first ? into.prepend(s) : into.append(s);
    };
    const pair = (kind, name, from, to, start = false) => {
      const m = { kind, name: name.trim().replace(/\s+/g, " ").slice(0, 40), from: `qs${marks.length}q`, to: `qe${marks.length}q` };
      marks.push(m);
      word(from, m.from, true);
      word(to, m.to, start);
    };
    const names = new Map([...document.querySelectorAll("table,tr,figure,h1,h2,h3,h4,.hash")].map((e) => [e, e.textContent]));
    for (const t of document.querySelectorAll("table")) {
      if (!t.classList.contains("long")) pair("table", names.get(t), t.caption, t.rows[t.rows.length - 1].cells[0]);
      for (const r of t.tBodies[0].rows) pair("row", names.get(r), r.cells[0], r.cells[r.cells.length - 1]);
    }
    for (const f of document.querySelectorAll("figure")) pair("figure", names.get(f), f, f.querySelector("figcaption"));
    for (const h of document.querySelectorAll("h1,h2,h3,h4,.hash")) {
      let next = h.nextElementSibling;
      while (next && ["UL", "DL", "DIV", "TABLE", "ARTICLE", "SECTION"].includes(next.tagName)) next = next.firstElementChild;
      if (!next || next.tagName === "TR") continue;
      if (next.tagName === "FIGURE") next = next.querySelector("figcaption");
      pair("heading", names.get(h), h, next, true); // of what follows, the start counts
    }
    return { marks, simulated: document.title.startsWith("SIMULATED") };
  });
}

// misplaced reads pdftotext's boxes and says what lies on two sheets at once, and
// which sheets of a simulated unit do not say so.
export function misplaced(boxes, { marks, simulated }) {
  const sheetOf = new Map();
  const sheets = boxes.split("<page ").slice(1);
  sheets.forEach((sheet, i) => {
    for (const [token] of sheet.matchAll(/q[se]\d+q/g)) sheetOf.set(token, i + 1);
  });
  const lines = [];
  for (const m of marks) {
    const [from, to] = [sheetOf.get(m.from), sheetOf.get(m.to)];
    if (!from || !to) lines.push(`${m.kind} "${m.name}": its mark is not in the print`);
    else if (from !== to) lines.push(`${m.kind} "${m.name}" begins on sheet ${from} and ends on sheet ${to}`);
  }
  if (simulated) {
    sheets.forEach((sheet, i) => sheet.includes("SIMULATED") || lines.push(`sheet ${i + 1} does not say SIMULATED`));
  }
  return lines;
}
