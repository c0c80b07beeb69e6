// The form: keeps fields and JSON in step, sends the question, shows what comes back. What the service refuses is its
// own to say: the text is sent as it stands.

import { shownDesign, shownFailure, shownProblem } from "./answer.js";
import { changedBy, holderOf, jsonText, questionIn, setAt, valueAt } from "./question.js";

const MOST_TRIES = 4;
const SECONDS_TO_ANSWER = 60;

const at = (id) => document.getElementById(id);
const form = at("form");
const text = at("question");
const fields = [...form.querySelectorAll("[data-at]")];
const examples = JSON.parse(at("examples").textContent);
const { units } = JSON.parse(at("vocabulary").textContent);
const pointersOf = (field) => field.dataset.at.split(" ");

/** Shows in the fields what the question says; a field whose place the question does not have rests. */
function readIntoFields() {
  const question = questionIn(text.value);
  at("question-fault").textContent = question ? "" : "This is no JSON object, so the fields rest.";
  for (const field of fields) {
    const pointers = pointersOf(field);
    const there = question && pointers.every((pointer) => holderOf(question, pointer));
    const value = there ? valueAt(question, pointers[0]) : undefined;
    field.disabled = !there;
    const note = at(`${field.id}-note`);
    if (field.getAttribute("aria-invalid") !== "true") {
      note.className = "hint";
      note.textContent = there || !question ? "" : "Not in this question.";
    }
    if (field.tagName === "SELECT") offer(field, value ?? "");
    else field.value = value ?? "";
    const unit = at(`${field.id}-unit`);
    if (unit) {
      const word = there ? valueAt(question, pointers[0].replace(/\/value$/, "/unit")) : undefined;
      unit.textContent = typeof word === "string" ? (units[word] ?? word) : "";
    }
  }
}

/** Chooses a word in a list; one the list does not have is added, since the service is the judge of it. */
function offer(list, word) {
  const known = [...list.options].some((option) => option.value === String(word));
  if (!known) list.add(new Option(String(word), String(word)));
  list.value = String(word);
}

/** Writes a field into the question. */
function writeFrom(field) {
  const question = questionIn(text.value);
  if (!question) return;
  let value = field.value;
  if (field.type === "number") value = value === "" ? null : Number(value);
  else if (value === "") value = undefined;
  for (const pointer of pointersOf(field)) setAt(question, pointer, value);
  text.value = jsonText(question);
}

function forgetFaults() {
  for (const field of fields) {
    field.removeAttribute("aria-invalid");
    at(`${field.id}-note`).textContent = "";
  }
}

/** The field that writes the member a pointer names, or one around it; undefined if there is none. */
function fieldAt(pointer) {
  const found = fields.find((field) => pointersOf(field).some((own) => own === pointer || own.replace(/\/value$/, "") === pointer
    || own.replace(/\/value$/, "/unit") === pointer));
  return found && !found.disabled ? found.id : undefined;
}

function markFaults(problem) {
  for (const fault of problem.errors ?? []) {
    const field = at(fieldAt(fault.pointer) ?? "");
    if (!field) continue;
    field.setAttribute("aria-invalid", "true");
    const note = at(`${field.id}-note`);
    note.className = "fault";
    note.textContent = fault.message;
  }
}

const wait = (seconds) => new Promise((resolve) => { setTimeout(resolve, seconds * 1000); });

/** Asks, and asks again while the service says that it has no room. */
async function ask(body) {
  const headers = { "Content-Type": "application/json" };
  if (at("key").value) headers.Authorization = `Bearer ${at("key").value}`;
  for (let tries = 1; ; tries += 1) {
    const signal = AbortSignal.timeout(SECONDS_TO_ANSWER * 1000);
    const reply = await fetch("/v1/loop-design", { method: "POST", headers, body, signal });
    const busy = reply.status === 503 || reply.status === 429;
    if (!busy || tries === MOST_TRIES) return reply;
    const seconds = Math.min(Number(reply.headers.get("Retry-After")) || 1, 10);
    at("progress").textContent = `The service is busy; asking again in ${seconds} s.`;
    await wait(seconds);
  }
}

/** Puts a remedy into the question that was answered, ready to be sent. */
function take(changes) {
  const question = questionIn(text.value);
  if (!question) return;
  text.value = jsonText(changedBy(changes, question));
  readIntoFields();
  at("progress").textContent = "The question was changed; send it to see.";
  at("send").focus();
}

async function outcomeOf(body) {
  let reply;
  try {
    reply = await ask(body);
  } catch (error) {
    return shownFailure(error.name === "TimeoutError"
      ? `There was no answer within ${SECONDS_TO_ANSWER} s. Nothing was stored; send it again.`
      : "The service could not be reached. Nothing was stored; send it again.");
  }
  let said;
  try {
    said = await reply.json();
  } catch {
    return shownFailure(`Status ${reply.status}, and the body is no JSON.`);
  }
  if (reply.ok) return shownDesign(said, take);
  markFaults(said);
  return shownProblem(said, fieldAt);
}

async function send() {
  const button = at("send");
  if (button.getAttribute("aria-disabled") === "true") return;
  button.setAttribute("aria-disabled", "true");
  forgetFaults();
  readIntoFields();
  at("progress").textContent = "Asking.";
  at("answer").setAttribute("aria-busy", "true");
  try {
    at("answer").replaceChildren(...(await outcomeOf(text.value)).filter(Boolean));
    at("progress").textContent = "Answered below.";
  } finally {
    button.removeAttribute("aria-disabled");
    at("answer").removeAttribute("aria-busy");
  }
  at("outcome")?.focus();
}

form.addEventListener("submit", (event) => {
  event.preventDefault();
  void send();
});
text.addEventListener("keydown", (event) => {
  if (event.key === "Enter" && (event.ctrlKey || event.metaKey)) void send();
});
text.addEventListener("input", readIntoFields);
for (const field of fields) field.addEventListener("input", () => writeFrom(field));
at("load").addEventListener("click", () => {
  text.value = jsonText(examples[at("start").value]);
  forgetFaults();
  readIntoFields();
});
readIntoFields();
