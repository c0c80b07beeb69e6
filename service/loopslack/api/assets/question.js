// A question as data: members found and set by JSON Pointer (RFC 6901), and its text as the pages print JSON.

const WIDEST = 76;

const steps = (pointer) => pointer.split("/").slice(1).map((step) => step.replaceAll("~1", "/").replaceAll("~0", "~"));

/** The value at a pointer; undefined where there is none. */
export function valueAt(question, pointer) {
  let found = question;
  for (const step of steps(pointer)) {
    if (found === null || typeof found !== "object" || !Object.hasOwn(found, step)) return undefined;
    found = found[step];
  }
  return found;
}

/** The object that holds the member a pointer names; undefined where there is none. */
export function holderOf(question, pointer) {
  const holder = valueAt(question, pointer.slice(0, pointer.lastIndexOf("/")));
  return holder !== null && typeof holder === "object" ? holder : undefined;
}

/** Sets the member a pointer names, or takes it away if the value is undefined. Its holder must be there. */
export function setAt(question, pointer, value) {
  const holder = holderOf(question, pointer);
  const name = steps(pointer).at(-1);
  if (holder === undefined) return;
  if (value === undefined) delete holder[name];
  else holder[name] = value;
}

/** A copy of a question after the changes of a remedy, taken in their order. */
export function changedBy(changes, question) {
  const made = structuredClone(question);
  for (const { action, field, value, word, number } of changes) {
    if (action === "remove") setAt(made, field, undefined);
    else if (action === "repeat") repeatAt(made, field);
    else {
      makeHolder(made, field);
      setAt(made, field, value ?? word ?? number);
    }
  }
  return made;
}

/** Makes the objects on the way to a member that are not there yet. */
function makeHolder(question, pointer) {
  let holder = question;
  for (const step of steps(pointer).slice(0, -1)) {
    if (holder[step] === undefined || holder[step] === null) holder[step] = {};
    holder = holder[step];
  }
}

/** Puts a copy of a list's entry right behind it. */
function repeatAt(question, pointer) {
  const list = holderOf(question, pointer);
  const place = Number(steps(pointer).at(-1));
  list.splice(place + 1, 0, structuredClone(list[place]));
}

const onOneLine = (value) => {
  if (Array.isArray(value)) return `[${value.map(onOneLine).join(", ")}]`;
  if (value === null || typeof value !== "object") return JSON.stringify(value);
  return `{${Object.entries(value).map(([name, member]) => `${JSON.stringify(name)}: ${onOneLine(member)}`).join(", ")}}`;
};

/** JSON for a person: what fits on a line stays on it. */
export function jsonText(value, indent = 0) {
  const short = onOneLine(value);
  const isLeaf = value === null || typeof value !== "object" || Object.keys(value).length === 0;
  if (isLeaf || short.length + indent <= WIDEST) return short;
  const pad = " ".repeat(indent + 2);
  const inner = Array.isArray(value)
    ? value.map((item) => pad + jsonText(item, indent + 2))
    : Object.entries(value).map(([name, member]) => `${pad}${JSON.stringify(name)}: ${jsonText(member, indent + 2)}`);
  const [open, close] = Array.isArray(value) ? "[]" : "{}";
  return `${open}\n${inner.join(",\n")}\n${" ".repeat(indent)}${close}`;
}

/** The question a text holds, or undefined where it is no JSON object. */
export function questionIn(text) {
  try {
    const question = JSON.parse(text);
    return question !== null && typeof question === "object" && !Array.isArray(question) ? question : undefined;
  } catch {
    return undefined;
  }
}
