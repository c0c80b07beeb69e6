// Shows what the service said: a design with its verdict first, or a refusal with every fault. Builds elements, never
// markup, so that nothing in an answer can become part of the page.

import { jsonText } from "./question.js";

const SVG = "http://www.w3.org/2000/svg";
const { words, states, hints, units } = JSON.parse(document.getElementById("vocabulary").textContent);

/** An element with attributes and children; null and undefined children are left out. */
export function element(name, attributes, ...children) {
  const made = document.createElement(name);
  for (const [key, value] of Object.entries(attributes ?? {})) made.setAttribute(key, value);
  made.append(...children.flat(Infinity).filter((child) => child !== null && child !== undefined));
  return made;
}

function sign(name) {
  const drawing = document.createElementNS(SVG, "svg");
  const use = document.createElementNS(SVG, "use");
  drawing.setAttribute("class", "sign");
  drawing.setAttribute("aria-hidden", "true");
  use.setAttribute("href", `#sign-${name}`);
  drawing.append(use);
  return drawing;
}

const said = (word) => word.replaceAll("-", " ");
const plate = (word, text = said(word)) =>
  element("span", { class: "verdict", "data-verdict": word }, sign(word), element("span", {}, text));

/** A quantity as a person writes it, to four digits; nothing for none. */
function quantity(found) {
  if (!found) return "";
  const number = Number(found.value.toPrecision(4)).toString().replace("-", "\u2212");
  return `${number} ${units[found.unit] ?? found.unit}`.trim();
}

function table(caption, heads, rows) {
  const row = ({ verdict, cells }) =>
    element("tr", { role: "row", ...(verdict ? { "data-verdict": verdict } : {}) },
      cells.map((cell, at) => element(at ? "td" : "th", {
        role: at ? "cell" : "rowheader", "data-label": heads[at], ...(at ? {} : { scope: "row" }),
      }, element("div", {}, cell))));
  return element("table", { class: heads.length > 3 ? "records broad" : "records", role: "table" },
    element("caption", {}, caption),
    element("thead", { role: "rowgroup" },
      element("tr", { role: "row" }, heads.map((head) => element("th", { scope: "col", role: "columnheader" }, head)))),
    element("tbody", { role: "rowgroup" }, rows.map(row)));
}

const figures = (pairs) =>
  element("dl", { class: "figures" }, pairs.filter(([, shown]) => shown).map(([name, shown]) =>
    [element("dt", {}, name), element("dd", {}, shown)]));

const raw = (title, value) => {
  const block = element("pre", { tabindex: "0", role: "region", "aria-label": title }, element("code", {}, jsonText(value)));
  return element("details", {}, element("summary", {}, title), block);
};

const heading = (...children) => element("h3", { tabindex: "-1", id: "outcome" }, ...children);

function vessel(result) {
  const found = result.chosenVessel ?? result.nearestVessel;
  const title = result.chosenVessel ? "Vessel chosen" : "Nearest vessel: do not build it";
  if (!found) return element("p", {}, "No vessel is shown: none of those that could be had comes near.");
  const pieces = found.pieces > 1 ? `${found.pieces} of ` : "";
  return element("div", {}, element("h4", {}, title), figures([
    ["Expansion vessel", `${pieces}${quantity(found.nominalVolume)} (${found.id})`],
    ["Rated pressure", quantity(found.ratedPressure)],
    ["Cooling vessel before it", quantity(found.coolingVessel?.content)],
    ["Smallest that holds", quantity(result.volumes?.recommended?.smallest)],
    ["Content of the loop", quantity(result.content?.total)],
  ]));
}

function settings(result) {
  const card = result.settings;
  if (!card) return element("div", {}, element("h4", {}, "Pressures to set"), element("p", {}, "None: no fill pressure keeps every check."));
  const span = `${quantity(card.window?.lower)} to ${quantity(card.window?.upper)}`;
  return element("div", {}, element("h4", {}, "Pressures to set"), figures([
    ["Precharge, vessel empty", quantity(card.precharge)],
    ["Fill to", quantity(card.fillPressure)],
    ["Fill window", card.window ? span : ""],
    ["Relief valve set at", quantity(card.reliefSetPressure)],
    ["Must stay below", quantity(card.finalPressure)],
  ]));
}

function checkRow(check) {
  return {
    verdict: check.verdict,
    cells: [
      [element("a", { href: `/docs/checks#${check.code}` }, said(check.code)), check.subject ? `: ${said(check.subject)}` : ""],
      plate(check.verdict, check.verdict === "does-not-hold" ? "FAILS" : said(check.verdict)),
      states[check.scenario] ?? said(check.scenario),
      check.value ? `${check.atLeast ? "at least " : ""}${quantity(check.value)}` : said(check.reason ?? "none"),
      quantity(check.limit) || "none",
      quantity(check.margin) || "none",
    ],
  };
}

/** Checks by outcome: what fails and what nobody could check is open to the eye, what holds is behind a heading. */
function checks(result) {
  const heads = ["check", "outcome", "state or doubt", "value", "limit", "margin"];
  const rows = (verdict) => result.checks.filter((check) => check.verdict === verdict).map(checkRow);
  const [failing, open, held] = [rows("does-not-hold"), rows("not-assessed"), rows("holds")];
  const count = (some) => `${some.length} of ${result.checks.length} checks`;
  return [
    element("h3", {}, "Checks"),
    failing.length ? table(`${count(failing)} fail`, heads, failing) : element("p", {}, `None of ${result.checks.length} checks fails.`),
    open.length ? table(`${count(open)} could not be made: no pass`, heads, open) : null,
    held.length ? element("details", {}, element("summary", {}, `${count(held)} hold`), table("Checks that hold", heads, held)) : null,
  ];
}

const sentences = (list, kind = "ol") => element(kind, {}, list.map(({ sentence }) => element("li", {}, sentence)));

/** A button that puts a remedy into the question. */
function taking(remedy, take) {
  const button = element("button", { type: "button", class: "take" }, "Put it into the question");
  button.addEventListener("click", () => take(remedy.changes));
  return button;
}

/** What would make the loop hold, where the answer says so: measures that do alone, else two that do together. */
function remedies(answer, take) {
  const found = answer.remedies;
  if (!found) return null;
  const { single = [], pair, toBeProved = [] } = found;
  return [
    element("h3", {}, "What would mend it"),
    element("p", {}, found.summary ?? ""),
    single.length ? element("ol", {}, single.map((remedy) => element("li", {}, remedy.sentence, " ", taking(remedy, take)))) : null,
    pair ? [element("p", {}, "Only both together: ", taking(pair, take)), sentences(pair.steps ?? [], "ul")] : null,
    toBeProved.length ? [element("p", {}, "To be measured before anything rests on it:"), sentences(toBeProved, "ul")] : null,
    answer.robustCooler ? element("p", {}, answer.robustCooler.sentence) : null,
  ];
}

/** What leaves through the relief valve where it opens. */
function discharge(result) {
  if (!result.discharge?.length) return null;
  return [element("h3", {}, "Where the relief valve opens"), element("ul", {}, result.discharge.map((case_) =>
    element("li", {}, element("strong", {}, states[case_.scenario] ?? said(case_.scenario)), `: ${case_.sentence}`)))];
}

function stagnation(result) {
  const rows = result.stagnation.map((state) => ({
    verdict: state.verdict,
    cells: [
      states[state.scenario] ?? said(state.scenario),
      plate(state.verdict),
      words.StagnationRegime[state.regime] ?? said(state.regime ?? ""),
      state.vesselPressure ? `${state.lowerBound ? "at least " : ""}${quantity(state.vesselPressure)}` : "none",
      quantity(state.steamVolume) || "none",
      quantity(state.mixedTemperature) || "none",
    ],
  }));
  return table("At rest in full sun",
    ["case", "outcome", "what happens", "pressure", "steam", "in the vessel"], rows);
}

function advisories(answer) {
  if (!answer.advisories?.length) return element("p", {}, "No advisories.");
  return element("ul", { class: "advice" }, answer.advisories.map((told) =>
    element("li", { "data-severity": told.severity },
      element("p", {}, element("span", { class: "severity", "data-severity": told.severity }, told.severity), ` ${told.message}`),
      element("p", {}, told.remedy))));
}

function confirm(result) {
  if (!result.toConfirm?.length) return null;
  return [element("h3", {}, "To be confirmed before building"), element("ul", {}, result.toConfirm.map((open) =>
    element("li", {}, said(open.code), open.subject ? `: ${said(open.subject)}` : "", open.field ? [" at ", element("code", {}, open.field)] : "")))];
}

function assumptions(answer) {
  const rows = (answer.assumptions ?? []).map((each) => ({
    cells: [element("code", {}, each.field), quantity(each.value) || each.word || "", each.why],
  }));
  if (!rows.length) return null;
  return element("details", {}, element("summary", {}, `${rows.length} assumptions stood in for what was not stated`),
    table("Assumptions", ["member", "value", "why"], rows));
}

/** A design, verdict first. `take` is given the changes of a remedy that somebody chooses. */
export function shownDesign(answer, take) {
  const { result } = answer;
  return [
    element("div", { class: "outcome", "data-verdict": result.verdict },
      heading(plate(result.verdict, said(result.verdict).toUpperCase()), " ", element("span", { class: "basis" }, result.basis)),
      element("p", {}, `${words.Verdict[result.verdict] ?? ""}. `, element("strong", {}, hints[result.verdict] ?? "")),
      element("p", {}, `Basis ${result.basis}: ${(words.Basis[result.basis] ?? "").toLowerCase()}. `,
        result.robust ? "All doubts at once are survived." : "Not all doubts at once are survived."),
      element("div", { class: "pair" }, vessel(result), settings(result))),
    element("h3", {}, "Advisories"),
    advisories(answer),
    confirm(result),
    remedies(answer, take),
    checks(result),
    element("h3", {}, "Stagnation"),
    stagnation(result),
    discharge(result),
    assumptions(answer),
    element("details", {}, element("summary", {}, "Cautions, for every such loop"),
      element("ul", {}, (answer.cautions ?? []).map((caution) => element("li", {}, caution.message)))),
    raw("The whole answer as JSON", answer),
  ].flat(Infinity);
}

/** A problem document, with a link to each field of the form that is at fault. */
export function shownProblem(problem, fieldAt) {
  const faults = (problem.errors ?? []).map((fault) => {
    const field = fieldAt(fault.pointer);
    const place = element("code", {}, fault.pointer || "the body");
    return element("li", {}, field ? element("a", { href: `#${field}` }, place) : place, ` (${said(fault.code)}): ${fault.message}`);
  });
  return [
    element("div", { class: "outcome", "data-verdict": "refused" },
      heading(plate("does-not-hold", `REFUSED: ${problem.title}`)),
      element("p", {}, `Status ${problem.status}. ${problem.detail}`),
      faults.length ? element("ol", { class: "faults" }, faults) : null,
      problem.furtherErrors ? element("p", {}, `${problem.furtherErrors} further faults are not listed.`) : null,
      /^\/docs\/problems\/[a-z-]+$/.test(problem.type ?? "")
        ? element("p", {}, element("a", { href: problem.type }, "What this kind of problem means"), `. Request id ${problem.requestId}.`)
        : null),
    raw("The problem document as JSON", problem),
  ];
}

/** What happened instead of an answer. */
export function shownFailure(message) {
  return [element("div", { class: "outcome", "data-verdict": "refused" },
    heading(plate("not-assessed", "NO ANSWER")), element("p", {}, message))];
}
