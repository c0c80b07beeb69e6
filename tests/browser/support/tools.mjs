// The packages of the browser tests, which lie outside the repository, where run.sh has installed them.
import { createRequire } from "node:module";
import { mkdirSync } from "node:fs";
import { join } from "node:path";

const folder = process.env.BROWSER_TOOLS;
if (!folder) throw new Error("BROWSER_TOOLS is not set; start the tests with tests/browser/run.sh");
const require = createRequire(join(folder, "package.json"));

export const { chromium } = require("playwright-core");
const axe = require("axe-core");

const RULES = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22a", "wcag22aa", "best-practice"];

/**
 * What axe finds wrong with a page, as lines "impact rule: target". Scripts are kept out by the page's own policy, so
 * the context must have been opened with `bypassCSP`; see `barrierFreeContext`.
 */
export async function accessibilityFindings(page) {
  await page.evaluate(`${axe.source}; 0`);
  const found = await page.evaluate(
    (values) => window.axe.run(document, { runOnly: { type: "tag", values }, resultTypes: ["violations"] }),
    RULES,
  );
  if (found.passes.length === 0) throw new Error("axe looked at nothing");
  return found.violations.flatMap(({ id, impact, nodes }) =>
    nodes.map((node) => `${impact} ${id}: ${node.target.join(" ")} (${node.failureSummary?.replaceAll(/\s+/g, " ")})`));
}

/** Saves what a page looks like, for a person to look at. */
export async function picture(page, name, options = {}) {
  const folderOfPictures = process.env.SCREENSHOTS;
  mkdirSync(folderOfPictures, { recursive: true });
  await page.screenshot({ path: join(folderOfPictures, `${name}.png`), ...options });
}

/** How far a page is wider than its window, in pixels. */
export async function overflow(page) {
  return page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
}

/** Words that a line breaks off in their middle, though nothing in them says where to break. */
export async function brokenWords(page, selector) {
  return page.evaluate((where) => {
    const broken = [];
    for (const element of document.querySelectorAll(where)) {
      const texts = document.createTreeWalker(element, NodeFilter.SHOW_TEXT);
      while (texts.nextNode()) {
        for (const word of texts.currentNode.data.matchAll(/[\p{L}\p{N}_]+/gu)) {
          const range = document.createRange();
          range.setStart(texts.currentNode, word.index);
          range.setEnd(texts.currentNode, word.index + word[0].length);
          if (new Set([...range.getClientRects()].map((box) => Math.round(box.top))).size > 1) broken.push(word[0]);
        }
      }
    }
    return broken;
  }, selector);
}
