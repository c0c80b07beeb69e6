// The calculation sheet of every loop of tests/sheet/loops as a page: it asks for nothing, fits every window, is barred
// to nobody, its figures are whole and no lettering touches another, on light and dark screens and on paper.
import assert from "node:assert/strict";
import { mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { accessibilityFindings, overflow, picture } from "./support/tools.mjs";

const LOOPS = join(dirname(dirname(fileURLToPath(import.meta.url))), "sheet", "loops");
const WIDTHS = [360, 768, 1280];
const A4 = [595, 842], LETTER = [612, 792];

export const seconds = 600;
// The page forbids every script; the tests' own are let in beside its policy.
export const options = { bypassCSP: true };

export default async function (context, url) {
  const names = readdirSync(LOOPS).filter((name) => name.endsWith(".json")).map((name) => name.slice(0, -5)).sort();
  assert.ok(names.length >= 6);
  const page = await context.newPage();
  const findings = [];
  for (const name of names) {
    const address = `${url}/sheet-of/${name}`;
    const data = JSON.parse(readFileSync(join(LOOPS, `${name}.json`), "utf8"));
    const body = await sheet(context, url, name, data);
    await context.route(address, (route) => route.fulfill({ status: 200, contentType: "text/html; charset=utf-8", body }));
    for (const colorScheme of ["light", "dark"]) {
      await page.emulateMedia({ colorScheme });
      for (const width of WIDTHS) {
        await page.setViewportSize({ width, height: 900 });
        await page.goto(address, { waitUntil: "load" });
        assert.equal(await overflow(page), 0, `${name} is wider than a window of ${width}`);
        findings.push(...(await page.evaluate(cut)).map((found) => `${name} at ${width}: ${found}`));
        if (width !== 768) await picture(page, `sheet-${name}-${colorScheme}-${width}`, { fullPage: true });
      }
      findings.push(...(await accessibilityFindings(page)).map((found) => `${name} ${colorScheme}: ${found}`));
    }
    await page.setViewportSize({ width: 1280, height: 900 });
    findings.push(...(await page.evaluate(touching)).map((found) => `${name}: ${found}`));
    await printed(page, name, data.design.units === "us" ? LETTER : A4);
  }
  assert.deepEqual(findings, []);
}

async function sheet(context, url, name, data) {
  const answer = await context.request.post(`${url}/v1/calculation-sheet/html`, { data, timeout: 60_000 });
  assert.equal(answer.status(), 200, `${name}: ${await answer.text()}`);
  assert.match(answer.headers()["content-type"], /^text\/html/);
  return answer.body();
}

/** Elements whose text reaches beyond them and is cut, or beyond the paper. Runs in the page. */
function cut() {
  const found = [];
  for (const part of document.querySelectorAll("td, th, dd, dt, p, li, h1, h2, h3, figcaption, caption")) {
    if (part.closest("thead") && getComputedStyle(part.closest("thead")).position === "absolute") continue;
    if (part.scrollWidth > part.clientWidth + 1 && part.clientWidth > 0) found.push(`cut: ${part.textContent.slice(0, 60)}`);
  }
  return found;
}

/** Lettering of figures that touches other lettering or lies off the drawing, as the browser sets it. Runs in the page. */
function touching() {
  const found = [];
  for (const figure of document.querySelectorAll("svg.ls-figure")) {
    const paper = figure.getBoundingClientRect();
    const letters = [...figure.querySelectorAll("text")].map((text) => [text.textContent, text.getBoundingClientRect()]);
    const rise = (box) => ({ left: box.left, right: box.right, top: box.top + box.height * 0.2, bottom: box.bottom - box.height * 0.2 });
    letters.forEach(([text, box], k) => {
      if (box.left < paper.left - 1 || box.right > paper.right + 1 || box.bottom > paper.bottom + 1) found.push(`off the drawing: ${text}`);
      for (const [other, its] of letters.slice(k + 1)) {
        const a = rise(box), b = rise(its);
        if (a.left + 0.5 < b.right && b.left + 0.5 < a.right && a.top < b.bottom && b.top < a.bottom) found.push(`"${text}" touches "${other}"`);
      }
    });
  }
  return found;
}

/** Prints the page: on its own paper, its card on one page, and not many more pages than the PDF of the service. */
async function printed(page, name, paper) {
  await page.emulateMedia({ colorScheme: "dark" });
  const file = await page.pdf({ preferCSSPageSize: true, printBackground: true, tagged: true });
  const folder = process.env.SCREENSHOTS;
  mkdirSync(folder, { recursive: true });
  writeFileSync(join(folder, `sheet-${name}.pdf`), file);
  const text = file.toString("latin1");
  const sizes = [...text.matchAll(/\/MediaBox\s*\[0 0 ([\d.]+) ([\d.]+)\]/g)].map(([, width, height]) => [Math.round(width), Math.round(height)]);
  assert.ok(sizes.length > 0 && sizes.length <= 24, `${name} is printed on ${sizes.length} pages`);
  for (const size of sizes) assert.deepEqual(size, paper, name);
  await page.emulateMedia({ media: "print" });
  const broken = await page.evaluate(() => {
    const card = document.querySelector(".card");
    return card === null ? 0 : card.getBoundingClientRect().height;
  });
  assert.ok(broken < 1000, `the card of ${name} is ${broken} pixels high and fits no page`);
  const dark = await page.evaluate(() => getComputedStyle(document.body).backgroundColor);
  assert.equal(dark, "rgb(255, 255, 255)", "paper is white on a dark screen too");
  await page.emulateMedia({ media: null });
}
