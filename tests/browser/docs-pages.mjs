// Every page of the documentation: it is found by links, loads without a complaint, fits every window, and is tagged
// so that nobody is kept out.
import assert from "node:assert/strict";
import { accessibilityFindings, brokenWords, overflow, picture } from "./support/tools.mjs";

const WIDTHS = [360, 768, 1280];
const LOOKED_AT = ["/docs", "/docs/operations", "/docs/operations/designLoop", "/docs/checks", "/docs/problems/invalid-field"];

export const seconds = 400;

export default async function (context, url) {
  const page = await context.newPage();
  await page.emulateMedia({ colorScheme: "light" });
  const findings = [];
  const paths = ["/docs"];
  const files = [];
  for (const path of paths) {
    await page.setViewportSize({ width: 1280, height: 900 });
    await open(page, url + path);
    for (const linked of await linksOf(page, url)) {
      const found = linked.startsWith("/docs/questions/") ? files : paths;
      if (!found.includes(linked)) found.push(linked);
    }
    assert.equal(await page.locator("h1").count(), 1, path);
    findings.push(...await look(page, path, "light"));
    await page.evaluate(() => document.querySelectorAll("details").forEach((part) => { part.open = true; }));
    for (const width of WIDTHS) {
      await page.setViewportSize({ width, height: 900 });
      assert.equal(await overflow(page), 0, `${path} is wider than a window of ${width}`);
      const whole = width < 1280 ? "dt, th, h1, h2, h3" : "dt, th, h1, h2, h3, td";
      assert.deepEqual(await brokenWords(page, whole), [], `${path} in a window of ${width}`);
    }
  }
  assert.ok(paths.length > 40, `only ${paths.length} pages are linked`);
  assert.ok(files.length > 0, "no question is linked that a reader could send");
  for (const file of files) {
    const answer = await page.request.get(url + file);
    assert.equal(answer.status(), 200, file);
    const texts = file.endsWith(".ndjson") ? (await answer.text()).trim().split("\n") : [await answer.text()];
    for (const text of texts) assert.equal(typeof JSON.parse(text), "object", file);
  }
  for (const path of LOOKED_AT) {
    for (const [colorScheme, width] of [["light", 1280], ["dark", 1280], ["dark", 360]]) {
      await page.setViewportSize({ width, height: 900 });
      await page.emulateMedia({ colorScheme });
      await open(page, url + path);
      if (colorScheme === "dark") findings.push(...await look(page, path, `dark at ${width}`));
      await picture(page, `docs${path.replaceAll("/", "-")}-${colorScheme}-${width}`);
    }
  }
  assert.deepEqual(findings, []);
}

async function open(page, address) {
  const answer = await page.goto(address, { waitUntil: "load" });
  assert.equal(answer.status(), 200, address);
}

async function look(page, path, how) {
  return (await accessibilityFindings(page)).map((finding) => `${path} ${how}: ${finding}`);
}

/** The pages of the documentation that a page links to. */
async function linksOf(page, url) {
  const links = await page.$$eval("a[href]", (all) => all.map((link) => new URL(link.href)).map(({ origin, pathname }) => ({ origin, pathname })));
  for (const { origin } of links) assert.equal(origin, url, `${page.url()} links to another host`);
  return new Set(links.map(({ pathname }) => pathname).filter((pathname) => pathname.startsWith("/docs")));
}
