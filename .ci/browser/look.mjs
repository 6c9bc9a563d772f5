// Looks at report pages as their readers do, and prints one line for each thing
// that is wrong; exit status 1 if there is any.
//
//   node look.mjs [--into FOLDER] PAGE.html ...
//
// Each page is validated, opened from its file in headless Chromium (a request or
// a console message is wrong), gone through by an accessibility checker in light
// and dark, on a phone and on a desk, and printed on A4 and Letter: no table row
// is cut, no table (but of the class long) or figure is cut, no heading is parted from what follows it, and a
// page that is SIMULATED says so on every sheet. With --into, pictures and prints of
// each page are kept in FOLDER, to be looked at.
import { execFileSync } from "node:child_process";
import { readFileSync, writeFileSync } from "node:fs";
import { createRequire } from "node:module";
import { basename, join, resolve } from "node:path";
import { pathToFileURL } from "node:url";
import { FileSystemConfigLoader, HtmlValidate } from "html-validate";
import { chromium } from "playwright-core";
import { mark, misplaced } from "./print.mjs";

const axe = readFileSync(createRequire(import.meta.url).resolve("axe-core/axe.min.js"), "utf8");

const readers = [
  { name: "desk", width: 1280, height: 900, colorScheme: "light" },
  { name: "dark", width: 1280, height: 900, colorScheme: "dark" },
  { name: "phone", width: 390, height: 844, colorScheme: "light" },
];

const papers = [
  { name: "A4", paperWidth: 8.2677, paperHeight: 11.6929 },
  { name: "Letter", paperWidth: 8.5, paperHeight: 11 },
];

let wrong = 0;
function report(page, where, text) {
  wrong++;
  console.log(`${basename(page)}: ${where}: ${text}`);
}

async function validate(page) {
  const loader = new FileSystemConfigLoader({ root: true, extends: ["html-validate:standard", "html-validate:a11y"], elements: ["html5"] });
  const found = await new HtmlValidate(loader).validateString(readFileSync(page, "utf8"), page);
  for (const r of found.results) {
    for (const m of r.messages) report(page, `line ${m.line}`, `${m.ruleId}: ${m.message}`);
  }
}

// opened is the page in a tab that tells of all it asks for and all it says.
async function opened(browser, page) {
  const tab = await browser.newPage({ bypassCSP: true }); // so that the checker can be put in
  const own = pathToFileURL(resolve(page)).href;
  tab.on("request", (r) => r.url() !== own && report(page, "opened", `request for ${r.url().slice(0, 100)}`));
  tab.on("console", (m) => report(page, "opened", `console: ${m.text()}`));
  tab.on("pageerror", (e) => report(page, "opened", `error: ${e}`));
  await tab.goto(own);
  await tab.evaluate(axe);
  return tab;
}

// read goes through the page as one of its readers sees it.
async function read(tab, folder, page, { name, width, height, colorScheme }) {
  await tab.setViewportSize({ width, height });
  await tab.emulateMedia({ colorScheme });
  const wide = await tab.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
  if (wide > 0) report(page, name, `${wide} pixels lie beyond the right edge`);
  if (folder) await tab.screenshot({ path: join(folder, `${basename(page, ".html")}.${name}.png`), fullPage: true });
  const found = await tab.evaluate(() => window.axe.run(document, { resultTypes: ["violations"] }));
  for (const v of found.violations) {
    for (const n of v.nodes) report(page, name, `${v.id}: ${n.target.join(" ")}: ${n.failureSummary.replace(/\s+/g, " ")}`);
  }
}

async function print(tab, folder, page) {
  const cdp = await tab.context().newCDPSession(tab);
  const onPaper = async ({ paperWidth, paperHeight }) => {
    const { data } = await cdp.send("Page.printToPDF", { paperWidth, paperHeight, printBackground: false });
    return Buffer.from(data, "base64");
  };
  if (folder) {
    for (const paper of papers) writeFileSync(join(folder, `${basename(page, ".html")}.${paper.name}.pdf`), await onPaper(paper));
  }
  const marks = await mark(tab);
  for (const paper of papers) {
    const boxes = execFileSync("pdftotext", ["-bbox", "-", "-"], { input: await onPaper(paper), encoding: "utf8", maxBuffer: 1 << 28 });
    for (const line of misplaced(boxes, marks)) report(page, paper.name, line);
  }
}

const args = process.argv.slice(2);
const folder = args[0] === "--into" ? args.splice(0, 2)[1] : null;
const browser = await chromium.launch({
  executablePath: process.env.CHROMIUM || "/usr/bin/chromium",
  headless: true,
  args: [
    "--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking",
    "--disable-component-update", "--disable-sync",
  ],
});
for (const page of args) {
  await validate(page);
  const tab = await opened(browser, page);
  for (const reader of readers) await read(tab, folder, page, reader);
  await print(tab, folder, page);
  await tab.close();
}
await browser.close();
process.exitCode = wrong ? 1 : 0;
