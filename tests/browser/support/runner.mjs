// Runs every test file of the folder above, each in a browser context of its own that reaches the service only.
import { readdirSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";
import { chromium } from "./tools.mjs";

const FLAGS = [
  "--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking",
  "--disable-component-update", "--disable-sync", "--disable-dev-shm-usage", "--proxy-server=direct://",
  // no name is ever looked up, so that even a request the filter does not see goes nowhere
  "--host-resolver-rules=MAP * ~NOTFOUND, EXCLUDE 127.0.0.1",
];
const SECONDS = 120;
const folder = dirname(dirname(fileURLToPath(import.meta.url)));
const url = process.argv[2].replace(/\/$/, "");
const filter = process.env.FILTER ?? "";

/** Watches a context: what it asks of other hosts is cut off, and that and every error is written down. */
async function watch(context) {
  const complaints = [];
  await context.route((asked) => !asked.href.startsWith(`${url}/`) && asked.protocol !== "data:" && asked.protocol !== "blob:",
    (route) => {
      complaints.push(`asked for ${route.request().url()}`);
      return route.abort("blockedbyclient");
    });
  context.on("console", (message) => {
    if (["error", "warning"].includes(message.type()) && !expected(message.text())) {
      complaints.push(`console ${message.type()}: ${message.text()} (${message.page()?.url()})`);
    }
  });
  context.on("weberror", (error) => complaints.push(`exception in a page: ${error.error().stack}`));
  return complaints;

  // Chromium itself writes a line for every answer of 400 and above; a test that asks for one says so.
  function expected(text) {
    return (context.expectedRefusals ?? []).some((status) => text.includes(`status of ${status}`));
  }
}

async function runOne(browser, name, test) {
  const context = await browser.newContext({ ...(test.options ?? {}) });
  context.setDefaultTimeout(20_000);
  const complaints = await watch(context);
  let timer;
  const late = new Promise((_, reject) => {
    const seconds = test.seconds ?? SECONDS;
    timer = setTimeout(() => reject(new Error(`not done after ${seconds} s`)), seconds * 1000);
  });
  try {
    await Promise.race([test.default(context, url), late]);
  } catch (error) {
    complaints.unshift(error.stack ?? String(error));
  } finally {
    clearTimeout(timer);
    await context.close().catch(() => {}); // a browser that died has none
  }
  if (!browser.isConnected()) return undefined;
  process.stdout.write(`${complaints.length ? "FAILED" : "passed"}  ${name}\n`);
  for (const complaint of complaints) process.stdout.write(`    ${complaint.replaceAll("\n", "\n    ")}\n`);
  return complaints.length === 0;
}

const names = readdirSync(folder).filter((name) => name.endsWith(".mjs") && name.includes(filter)).sort();
let passed = 0;
let failed = 0;

/** Runs one file in a browser of its own; a browser that dies says nothing of the page, so once more, then it counts. */
async function runFresh(name, test) {
  for (const attempt of ["first", "second"]) {
    const browser = await chromium.launch({ executablePath: process.env.CHROMIUM, args: FLAGS });
    try {
      const outcome = await runOne(browser, name, test);
      if (outcome !== undefined) return outcome;
    } finally {
      await browser.close().catch(() => {});
    }
    process.stdout.write(`${name}: the browser died in the ${attempt} run\n`);
  }
  process.stdout.write(`FAILED  ${name}\n`);
  return false;
}

try {
  for (const name of names) {
    const test = await import(pathToFileURL(join(folder, name)));
    if (typeof test.default !== "function") {
      process.stdout.write(`FAILED  ${name}: it exports no default function\n`);
      failed += 1;
      continue;
    }
    if (await runFresh(name, test)) passed += 1;
    else failed += 1;
  }
} catch (error) {
  failed += 1;
  process.stdout.write(`FAILED  ${error.stack ?? error}\n`);
}
process.stdout.write(`browser: ${passed} passed, ${failed} failed\n`);
process.exit(passed > 0 && failed === 0 ? 0 : 1);
