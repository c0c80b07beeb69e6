// The calculation sheet of every loop of tests/sheet/loops as PDF, looked at with tools that did not make it: it is
// sound, tagged, has its fonts inside, can be searched, shows the numbers of the JSON answer, and is the same each time.
import assert from "node:assert/strict";
import { execFileSync } from "node:child_process";
import { mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";

const LOOPS = join(dirname(dirname(fileURLToPath(import.meta.url))), "sheet", "loops");
const WORDS = {
  en: { holds: "HOLDS", "favourable-only": "HOLDS ONLY IF ALL GOES WELL", "does-not-hold": "DOES NOT HOLD" },
  de: {
    holds: "NACHWEIS ERFÜLLT",
    "favourable-only": "NUR IM GÜNSTIGEN FALL ERFÜLLT",
    "does-not-hold": "NACHWEIS NICHT ERFÜLLT",
  },
};

// An older Poppler complains of a word of the tags it does not know yet.
const QUIET = { encoding: "utf8", stdio: ["ignore", "pipe", "ignore"] };

export const seconds = 600;

export default async function (context, url) {
  const folder = process.env.SCREENSHOTS;
  mkdirSync(folder, { recursive: true });
  for (const file of readdirSync(LOOPS).filter((name) => name.endsWith(".json")).sort()) {
    const name = file.slice(0, -5);
    const question = JSON.parse(readFileSync(join(LOOPS, file), "utf8"));
    const sheet = await ask(context, `${url}/v1/calculation-sheet/pdf`, question, "application/pdf");
    const path = join(folder, `typeset-${name}.pdf`);
    writeFileSync(path, sheet);
    const design = { ...question.design, include: [] };
    const answer = JSON.parse(await ask(context, `${url}/v1/loop-design`, design, "application/json"));
    sound(path, name, question.design.units === "us");
    numbers(path, name, question, answer);
    execFileSync("pdftoppm", ["-r", "70", "-png", path, join(folder, `typeset-${name}`)]);
    if (name === "wash-house") {
      const again = await ask(context, `${url}/v1/calculation-sheet/pdf`, question, "application/pdf");
      assert.ok(again.equals(sheet), "the same question gave other bytes");
    }
  }
}

async function ask(context, address, data, mediaType) {
  const answer = await context.request.post(address, { data, timeout: 60_000 });
  assert.equal(answer.status(), 200, `${address}: ${(await answer.body()).subarray(0, 500)}`);
  assert.equal(answer.headers()["content-type"].split(";")[0], mediaType);
  return answer.body();
}

function sound(path, name, letter) {
  execFileSync("qpdf", ["--check", path], { stdio: "pipe" });
  const info = execFileSync("pdfinfo", [path], QUIET);
  assert.match(info, /Tagged:\s+yes/, name);
  assert.match(info, /JavaScript:\s+no/, name);
  assert.match(info, /Title:\s+\S/, name);
  assert.match(info, letter ? /Page size:\s+612 x 792/ : /Page size:\s+595\.\d+ x 841\.\d+/, name);
  const pages = Number(/Pages:\s+(\d+)/.exec(info)[1]);
  assert.ok(pages >= 4 && pages <= 20, `${name} has ${pages} pages`);
  const fonts = execFileSync("pdffonts", [path], QUIET).split("\n").slice(2).filter((line) => line);
  assert.ok(fonts.length > 0, name);
  // the columns from the right: object number, subset of unicode, subset, embedded
  for (const font of fonts) assert.deepEqual(font.trim().split(/\s+/).slice(-5, -2), ["yes", "yes", "yes"], font);
}

/** The verdict and the numbers an installer sets, as the JSON answer has them. */
function numbers(path, name, question, { result, advisories }) {
  const text = execFileSync("pdftotext", ["-layout", path, "-"], QUIET).replaceAll("\u00a0", " ");
  const language = question.language ?? "en";
  const say = ({ value, unit }) => {
    const places = unit === "psig" ? 1 : 2;
    const shown = (Math.round(value * 10 ** places + 1e-9) / 10 ** places).toFixed(places);
    const written = language === "de" ? shown.replace(".", ",") : shown;
    return `${written} ${{ barg: language === "de" ? "bar(ü)" : "bar(g)", psig: "psig" }[unit]}`;
  };
  assert.ok(text.includes(WORDS[language][result.verdict]), `${name} does not say ${result.verdict}`);
  const shown = [];
  if (result.settings) shown.push(result.settings.precharge, result.settings.fillPressure, result.settings.finalPressure);
  for (const state of result.states) if (state.vesselPressure) shown.push(state.vesselPressure);
  assert.ok(shown.length >= 4, name);
  for (const quantity of shown) assert.ok(text.includes(say(quantity)), `${name} does not show ${say(quantity)}`);
  const stop = language === "de" ? "HALT" : "STOP";
  assert.equal(text.includes(`${stop} `), advisories.some(({ severity }) => severity === "stop"), `${name}: ${stop}`);
  const forbidden = language === "de" ? "nicht bauen" : "Do not build";
  assert.equal(text.includes(forbidden), result.verdict !== "holds", `${name}: ${forbidden}`);
}
