// The part of the form that handles a question as data, taken by itself: pointers, remedies, and its JSON, which is
// written as the pages write theirs.
import assert from "node:assert/strict";

export default async function (context, url) {
  const page = await context.newPage();
  await page.goto(`${url}/docs/try`);
  const call = (name, ...given) => page.evaluate(async ([called, values]) => {
    const module = await import("/docs/assets/question.js");
    return module[called](...values);
  }, [name, given]);

  const question = { site: { altitude: { value: 5, unit: "m" } }, runs: [{ id: "a" }, { id: "b" }], "a/b~c": { d: 1 } };
  assert.equal(await call("valueAt", question, "/runs/1/id"), "b");
  assert.equal(await call("valueAt", question, "/a~1b~0c/d"), 1);
  assert.equal(await call("valueAt", question, "/site/nothing/there"), undefined);
  assert.equal(await call("valueAt", question, "/toString"), undefined);

  const changes = [
    { action: "remove", field: "/site/altitude" },
    { action: "remove", field: "/not/there" },
    { action: "set", field: "/station/steamCooler", value: { value: 565, unit: "W" } },
    { action: "set", field: "/vessel/kind", word: "given" },
    { action: "repeat", field: "/runs/0" },
    { action: "set", field: "/runs/1/id", word: "copy" },
    { action: "set", field: "/vesselsInParallel", number: 2 },
  ];
  assert.deepEqual(await call("changedBy", changes, question), {
    site: {},
    runs: [{ id: "a" }, { id: "copy" }, { id: "b" }],
    "a/b~c": { d: 1 },
    station: { steamCooler: { value: 565, unit: "W" } },
    vessel: { kind: "given" },
    vesselsInParallel: 2,
  });

  const examples = JSON.parse(await page.textContent("#examples"));
  assert.equal(await call("jsonText", examples["first-question"]), await page.inputValue("#question"));
  for (const example of Object.values(examples)) assert.deepEqual(JSON.parse(await call("jsonText", example)), example);
  for (const text of ["{", "[]", "null", "3", ""]) assert.equal(await call("questionIn", text), undefined, text);
}
