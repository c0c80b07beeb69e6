// Without a script every page can be read, and the one with the form says what to do instead. On paper nothing is lost.
import assert from "node:assert/strict";
import { picture } from "./support/tools.mjs";

export const options = { javaScriptEnabled: false };

export default async function (context, url) {
  const page = await context.newPage();
  await page.goto(`${url}/docs`);
  assert.match(await page.innerText("main"), /A first request/);
  await page.goto(`${url}/docs/try`);
  const text = await page.innerText("main");
  assert.match(text, /needs a script/);
  assert.match(text, /curl "\$SERVICE\/v1\/loop-design"/);
  assert.equal(await page.isVisible("#question"), true);
  assert.match(await page.inputValue("#question"), /coldestOutdoorTemperature/);
  assert.equal(await page.isVisible("#send"), false);
  assert.equal(await page.isVisible("#count"), false);
  await onPaper(page, url);
}

async function onPaper(page, url) {
  await page.setViewportSize({ width: 794, height: 1123 });
  await page.emulateMedia({ media: "print" });
  await page.goto(`${url}/docs/operations/designLoop`);
  assert.equal(await page.isVisible("nav.run"), false);
  assert.equal(await page.isVisible("h1"), true);
  const example = page.locator("details pre").first();
  assert.ok((await example.boundingBox()).height > 100, "what is folded on the screen is open on paper");
  assert.match(await example.innerText(), /coldestOutdoorTemperature/);
  await page.goto(`${url}/docs/checks`);
  await picture(page, "docs-checks-on-paper", { fullPage: true });
  const paper = await page.pdf({ format: "A4", tagged: true });
  assert.ok(paper.length > 20_000);
}
