// The form sends what it shows and shows what came back: a design that holds, one that does not, a refusal, no answer.
import assert from "node:assert/strict";
import { accessibilityFindings, brokenWords, overflow, picture } from "./support/tools.mjs";

export default async function (context, url) {
  const page = await context.newPage();
  await page.goto(`${url}/docs/try`);
  await aFirstQuoteIsDesigned(page);
  await fieldsAndJsonFollowEachOther(page);
  await aDesignThatDoesNotHoldIsUnmistakable(page);
  await aRemedyIsPutIntoTheQuestion(page);
  await usUnitsAreShown(page);
  context.expectedRefusals = [422, 400];
  await aRefusalShowsEveryFault(page);
  await textThatIsNoJsonIsTheServicesToRefuse(page);
  await nothingInAnAnswerBecomesMarkup(page);
  await aServiceOutOfReachIsSaid(page);
  await aKeyIsSentAsTheServiceAsksForIt(page);
}

/** Sends the question; what was sent, what the service said, and what the page says of it. */
async function asked(page) {
  await page.evaluate(() => document.getElementById("answer").replaceChildren());
  const answered = page.waitForResponse("**/v1/loop-design");
  const text = await ask(page);
  const response = await answered;
  return { text, sent: JSON.parse(response.request().postData()), told: await response.json() };
}

async function ask(page) {
  await page.evaluate(() => document.getElementById("answer").replaceChildren());
  await page.click("#send");
  await page.waitForSelector("#outcome");
  assert.equal(await page.evaluate(() => document.activeElement.id), "outcome", "the answer has the focus");
  return page.locator("#answer").innerText();
}

async function start(page, name) {
  await page.selectOption("#start", name);
  await page.click("#load");
}

async function aFirstQuoteIsDesigned(page) {
  const { text, sent, told } = await asked(page);
  assert.equal(sent.collectors[0].count, Number(await page.inputValue("#count")));
  assert.equal(told.result.verdict, "holds");
  assert.match(text, /HOLDS/);
  assert.ok(text.includes(`${told.result.chosenVessel.nominalVolume.value} L`), "the vessel");
  const fill = Number(told.result.settings.fillPressure.value.toPrecision(4));
  assert.ok(text.includes(`${fill} barg`), "the fill pressure");
  for (const advisory of told.advisories) assert.ok(text.includes(advisory.message), advisory.message);
  const whole = await page.locator("#answer details").last().locator("code").textContent();
  assert.deepEqual(JSON.parse(whole), told, "the whole answer is there as JSON");
  const held = told.result.checks.filter((check) => check.verdict === "holds").length;
  assert.ok(text.includes(`${held} of ${told.result.checks.length} checks hold`));
  assert.deepEqual(await accessibilityFindings(page), []);
  await picture(page, "docs-try-holds", { fullPage: true });
}

async function fieldsAndJsonFollowEachOther(page) {
  const question = async () => JSON.parse(await page.inputValue("#question"));
  await page.fill("#length", "30");
  assert.deepEqual((await question()).pipeRuns.map((run) => run.segments[0].length.value), [30, 30]);
  await page.selectOption("#emptying", "");
  assert.equal("emptyingClass" in (await question()).collectors[0], false);
  const other = await question();
  other.collectors[0].count = 7;
  other.staticHeight = { value: 20, unit: "ft" };
  await page.fill("#question", JSON.stringify(other));
  assert.equal(await page.inputValue("#count"), "7");
  assert.equal(await page.textContent("#height-unit"), "ft");
  await page.fill("#question", "{");
  assert.equal(await page.isDisabled("#count"), true);
  assert.match(await page.textContent("#question-fault"), /no JSON object/);
  await page.fill("#question", "{}");
  assert.equal(await page.isDisabled("#count"), true);
  assert.match(await page.textContent("#count-note"), /Not in this question/);
}

async function aDesignThatDoesNotHoldIsUnmistakable(page) {
  await start(page, "vessel-too-small");
  const { text, told } = await asked(page);
  assert.equal(told.result.verdict, "does-not-hold");
  assert.match(text, /DOES NOT HOLD/);
  assert.match(text, /do not build it/i);
  const { single = [], pair } = told.remedies;
  const said = [...single, ...(pair?.steps ?? []), ...told.result.discharge];
  assert.ok(single.length + (pair ? 2 : 0) > 0, "remedies");
  for (const { sentence } of said) assert.ok(text.includes(sentence), sentence);
  const failing = told.result.checks.filter((check) => check.verdict === "does-not-hold").length;
  assert.equal(await page.locator("#answer tr[data-verdict=does-not-hold]", { hasText: "FAILS" }).count(), failing);
  assert.equal(await page.locator("#answer .severity[data-severity=stop]").count(),
    told.advisories.filter((advisory) => advisory.severity === "stop").length);
  // without colour: the word, a drawn sign and a double frame are left
  await page.emulateMedia({ forcedColors: "active" });
  assert.equal(await page.locator(".outcome").evaluate((element) => getComputedStyle(element).borderTopStyle), "double");
  assert.ok((await page.locator(".outcome .sign").boundingBox()).width > 10);
  await page.emulateMedia({ forcedColors: "none" });
  for (const [width, colorScheme] of [[1280, "light"], [768, "dark"], [360, "light"], [360, "dark"]]) {
    await page.setViewportSize({ width, height: 900 });
    await page.emulateMedia({ colorScheme });
    assert.equal(await overflow(page), 0, `wider than a window of ${width}`);
    assert.deepEqual(await brokenWords(page, "label, legend, .figures dt, .figures dd"), [], `in a window of ${width}`);
    assert.deepEqual(await accessibilityFindings(page), []);
    await picture(page, `docs-try-does-not-hold-${width}-${colorScheme}`, { fullPage: true });
  }
}

async function aRemedyIsPutIntoTheQuestion(page) {
  await page.locator("#answer .take").first().click();
  assert.equal(await page.evaluate(() => document.activeElement.id), "send");
  const { text, told } = await asked(page);
  assert.equal(told.result.verdict, "holds", "what the service calls a remedy is one");
  assert.match(text, /HOLDS/);
}

async function usUnitsAreShown(page) {
  await start(page, "cabin-in-us-units");
  assert.equal(await page.textContent("#coldest-unit"), "°F");
  const text = await ask(page);
  assert.match(text, /psig/);
  assert.doesNotMatch(text, /barg/);
}

async function aRefusalShowsEveryFault(page) {
  await start(page, "refused");
  const text = await ask(page);
  assert.match(text, /REFUSED/);
  for (const pointer of ["/collectors/0/count", "/staticHeight/unit", "/reliefValve/setPresure"]) assert.ok(text.includes(pointer), pointer);
  assert.equal(await page.getAttribute("#count", "aria-invalid"), "true");
  assert.match(await page.textContent("#count-note"), /outside the range/);
  await page.click('#answer a[href="#count"]');
  assert.equal(await page.evaluate(() => document.activeElement.id), "count");
  assert.deepEqual(await accessibilityFindings(page), []);
  await picture(page, "docs-try-refused", { fullPage: true });
  const meaning = await page.getAttribute("#answer a[href^='/docs/problems/']", "href");
  assert.equal((await page.request.get(new URL(meaning, page.url()).href)).status(), 200);
}

async function textThatIsNoJsonIsTheServicesToRefuse(page) {
  await page.fill("#question", '{"site": NaN}');
  assert.match(await ask(page), /REFUSED/);
  assert.equal(await page.getAttribute("#count", "aria-invalid"), null);
}

async function nothingInAnAnswerBecomesMarkup(page) {
  await start(page, "first-question");
  const question = JSON.parse(await page.inputValue("#question"));
  question["<img src=x onerror=alert(1)>"] = 1;
  await page.fill("#question", JSON.stringify(question));
  assert.ok((await ask(page)).includes("<img src=x onerror=alert(1)>"));
  assert.equal(await page.locator("#answer img").count(), 0);
}

async function aServiceOutOfReachIsSaid(page) {
  await start(page, "first-question");
  let refusals = 0;
  await page.route("**/v1/loop-design", (route) => {
    refusals += 1;
    return refusals === 1
      ? route.fulfill({ status: 503, headers: { "Retry-After": "1" }, contentType: "application/problem+json", body: "{}" })
      : route.continue();
  });
  page.context().expectedRefusals = [503];
  assert.match(await ask(page), /HOLDS/, "a full service is asked again after the seconds it named");
  assert.equal(refusals, 2);
  await page.unroute("**/v1/loop-design");
  await page.route("**/v1/loop-design", (route) => route.fulfill({ status: 502, contentType: "text/plain", body: "no" }));
  page.context().expectedRefusals = [502];
  assert.match(await ask(page), /NO ANSWER/);
}

async function aKeyIsSentAsTheServiceAsksForIt(page) {
  await page.unroute("**/v1/loop-design");
  await page.click("summary:has-text('asks for a key')");
  await page.fill("#key", "not a key");
  const request = page.waitForRequest("**/v1/loop-design");
  await ask(page);
  assert.equal((await request).headers().authorization, "Bearer not a key");
}
