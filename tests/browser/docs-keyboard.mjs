// Everything can be done without a mouse: the content is one key away, each control is reached in the order it is
// read, seen when it has the focus, and left again; a design is asked for and its answer read.
import assert from "node:assert/strict";

const REACHABLE = "a[href], button, input, select, textarea, summary, [tabindex='0']";

export default async function (context, url) {
  const page = await context.newPage();
  for (const path of ["/docs", "/docs/checks", "/docs/operations/designLoop", "/docs/try"]) {
    await page.goto(url + path);
    await everyControlIsReachedAndSeen(page, path);
  }
  await theContentIsOneKeyAway(page, url);
  await aDesignIsAskedFor(page, url);
}

const focused = (page) => page.evaluate(() => {
  const element = document.activeElement;
  const style = getComputedStyle(element);
  const box = element.getBoundingClientRect();
  return {
    order: [...document.querySelectorAll("*")].indexOf(element),
    name: element.id || element.textContent.trim().slice(0, 40) || element.tagName,
    isBody: element === document.body,
    outlined: style.outlineStyle !== "none" && parseFloat(style.outlineWidth) >= 2,
    inView: box.bottom > 0 && box.top < innerHeight && box.right > 0 && box.left < innerWidth,
  };
});

async function everyControlIsReachedAndSeen(page, path) {
  const expected = await page.$$eval(REACHABLE, (all) => {
    const inClosedPart = (element) => {
      const part = element.closest("details:not([open])");
      return part && !(element.tagName === "SUMMARY" && element.parentElement === part);
    };
    const everything = [...document.querySelectorAll("*")];
    return all.filter((element) => element.checkVisibility() && !element.disabled && !inClosedPart(element))
      .map((element) => everything.indexOf(element));
  });
  const reached = [];
  for (let presses = 0; presses <= expected.length; presses += 1) {
    await page.keyboard.press("Tab");
    const found = await focused(page);
    if (found.isBody) break;
    assert.ok(found.outlined, `${path}: ${found.name} does not show that it has the focus`);
    assert.ok(found.inView, `${path}: ${found.name} has the focus out of sight`);
    reached.push(found.order);
  }
  assert.deepEqual(reached.slice(0, expected.length), expected, `${path}: the order of the keys is that of the page`);
}

async function theContentIsOneKeyAway(page, url) {
  await page.goto(`${url}/docs`);
  await page.keyboard.press("Tab");
  assert.match((await focused(page)).name, /Skip to the content/);
  await page.keyboard.press("Enter");
  assert.equal(await page.evaluate(() => document.activeElement.id), "content");
}

async function aDesignIsAskedFor(page, url) {
  await page.goto(`${url}/docs/try`);
  await page.focus("#count");
  await page.keyboard.press("Control+A");
  await page.keyboard.type("4");
  assert.equal(JSON.parse(await page.inputValue("#question")).collectors[0].count, 4);
  await page.keyboard.press("Enter");
  await page.waitForSelector("#outcome");
  assert.equal(await page.evaluate(() => document.activeElement.id), "outcome");
  await page.keyboard.press("Tab");
  assert.ok(await page.evaluate(() => document.getElementById("answer").contains(document.activeElement)), "the answer goes on from there");
  await page.evaluate(() => document.getElementById("answer").replaceChildren());
  await page.focus("#question");
  await page.keyboard.press("Tab");
  assert.notEqual(await page.evaluate(() => document.activeElement.id), "question", "the text lets the focus go");
  await page.focus("#question");
  await page.keyboard.press("Control+Enter");
  await page.waitForSelector("#outcome");
}
