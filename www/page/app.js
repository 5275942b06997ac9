// Start, addresses, and the entry of the question in view. What is asked and answered comes from the core alone.
import init, { ask, catalogue } from "./core.js";
import { showAll, showAnswer, showEntered, showStanding, spoken } from "./answer.js";
import { byId, copy, download, fill, say, steady, within } from "./dom.js";
import { columnsOf, infoOf, isAsked, namesIn, unitName, unitsOf, usualUnit } from "./field.js";
import { buildForm } from "./form.js";
import { hint, startHint } from "./install.js";
import { LINK_AT_MOST, readLink } from "./link.js";
import { startOffline } from "./offline.js";
import { startRestart } from "./restart.js";
import { startSettings } from "./settings.js";
import { asideText, asides, dropAsides, keepAside, openStore, record, recordsOf, save, saved } from "./store.js";

/** @typedef {import("./core.js").Question} Question */
/** @typedef {import("./core.js").Answer} Answer */
/** @typedef {import("./core.js").Catalogue} Catalogue */
/** @typedef {Record<string, string>} Entry */

const STEPS_KEPT = 50;
const STEPS_SIZE = 1_000_000; // characters of all of them: each key writes them to disk
const SLOW_MS = 8; // half a frame: an answer that takes longer waits until the person stops typing
const PAUSE_MS = 150;
const STORE_MS = 4000; // a store that does not open by then may not open at all
const SETTLED_MS = 1000; // then an answer is read out and the address follows

/** @type {Catalogue} */
let all;
/** @type {Question | undefined} */
let question;
/** @type {ReturnType<typeof buildForm> | undefined} */
let form;
/** @type {Answer} */
let answer;
/** @type {Entry} */
let entry = {};
let step = ""; // changes of one step are undone together
let tried = false; // everything required was there once: now everything wrong is said
/** @type {Set<string>} */
const visited = new Set();
/** @type {Entry | undefined} own entry, while one that came by link is looked at */
let earlier;
let pressing = false;
let settling = 0;
let took = 0; // milliseconds of the last answer
let waiting = 0; // for an answer

const site = () => record("site");
const own = () => record(`question-${question?.id}`);
/** @param {Question} of @param {boolean} shared */
const namesOf = (of, shared) => of.fields.filter((field) => field.shared === shared)
  .flatMap(namesIn);
/** @param {Entry} from @param {string[]} names @returns {Entry} */
const pick = (from, names) => Object.fromEntries(names.flatMap((name) => {
  const text = from[name];
  return text === undefined ? [] : [[name, text]];
}));
/** @param {Question} of @returns {Entry} */
const keptEntry = (of) =>
  ({ ...pick(site().entry, namesOf(of, true)), ...pick(record(`question-${of.id}`).entry, namesOf(of, false)) });

function units() {
  const field = all.questions.flatMap((each) => each.fields).find((each) => each.name === all.units_field);
  const inView = question?.fields.some((each) => each.name === all.units_field);
  return (inView ? entry : site().entry)[all.units_field] || field?.default || "metric";
}

/** Puts the entry in view into its records and on disk. */
function keep() {
  if (!question) return;
  own().when = Date.now();
  const [shared, mine] = [namesOf(question, true), namesOf(question, false)];
  for (const [kept, names] of /** @type {const} */ ([[site(), shared], [own(), mine]])) {
    for (const name of names) delete kept.entry[name];
    Object.assign(kept.entry, pick(entry, names));
    save(kept);
  }
}

/** A bare number keeps the unit it was typed in when the choice of units changes. @param {string} old */
function pinUnits(old) {
  const fields = all.questions.flatMap((each) => each.fields);
  for (const texts of [entry, ...recordsOf("").map((kept) => kept.entry)]) {
    for (const field of fields) {
      for (const [unit, of] of unitsOf(field)) {
        const info = infoOf(all.quantities, of);
        if (info && texts[field.name] && !texts[unit]) texts[unit] = usualUnit(info, old);
      }
    }
  }
  for (const kept of recordsOf("question-")) save(kept);
}

/** @param {Entry} patch @param {string} [of] */
function change(patch, of = "") {
  if (!question) return;
  if (step !== of || of === "") stack(own().undo, earlier ?? entry);
  step = of;
  earlier = undefined;
  own().redo.length = 0;
  if (patch[all.units_field] !== undefined) pinUnits(units());
  for (const [name, text] of Object.entries(patch)) {
    if (text === "") delete entry[name];
    else entry[name] = text;
  }
  keep();
  if (of === "" || patch[all.units_field] !== undefined) form?.write(entry);
  clearTimeout(waiting);
  if (of !== "" && took > SLOW_MS) waiting = setTimeout(refresh, PAUSE_MS);
  else refresh();
}

/** Adds a state to come back to. @param {Entry[]} list @param {Entry} state */
function stack(list, state) {
  list.push({ ...state });
  list.splice(0, list.length - STEPS_KEPT);
  const size = () => list.flatMap(Object.values).reduce((sum, text) => sum + text.length, 0);
  while (list.length > 1 && size() > STEPS_SIZE) list.shift();
}

/** @param {"undo" | "redo"} from @param {"undo" | "redo"} to */
function travel(from, to) {
  const state = own()[from].pop();
  if (!state) return;
  stack(own()[to], entry);
  entry = state;
  keep();
  show(state);
}

/** Shows an entry in the form. @param {Entry} state */
function show(state) {
  entry = { ...state };
  step = "";
  for (const name of Object.keys(entry)) visited.add(name);
  form?.write(entry);
  refresh();
}

/** Asks, and shows what comes back. */
function refresh() {
  clearTimeout(waiting);
  waiting = 0;
  if (!question) return;
  const start = performance.now();
  answer = ask(question.id, entry);
  took = performance.now() - start;
  tell();
}

/** Shows what came back, as far as it may be said by now. */
function tell() {
  if (!question) return;
  tried ||= question.fields.every((field) => !field.required || entry[field.name] || !isAsked(field, answer.read));
  const problems = answer.problems.filter(({ field, cell }) => tried || cell || visited.has(field));
  const typing = document.activeElement?.getAttribute("name") ?? ""; // nothing is wrong yet with what is being typed
  const shown = problems.filter(({ field, cell }) =>
    (field !== typing || visited.has(typing)) && (!cell || form?.ripe(field, cell)));
  const of = question;
  steady(byId("form"), () => {
    form?.tell(answer.read, shown, answer.notes.filter((note) => note.fixes.length > 0), answer.booked);
    showAnswer(of, answer, shown, { fix, take, focus: (name, cell) => form?.focus(name, cell) });
  });
  for (const key of /** @type {NodeListOf<HTMLButtonElement>} */ (byId("form").querySelectorAll("[data-travel]"))) {
    key.disabled = own()[key.dataset.travel === "redo" ? "redo" : "undo"].length === 0;
  }
  clearTimeout(settling);
  settling = setTimeout(settle, SETTLED_MS);
}

/** Reads the answer out once, and makes the address hold the entry. */
function settle() {
  if (!question) return;
  const words = spoken(answer);
  if (byId("said").textContent !== words) byId("said").textContent = words;
  if (earlier) return; // the address still is the link that was followed
  // What no one could read back is left out: it is kept here all the same.
  const link = answer.entry.length > LINK_AT_MOST ? "" : `?${answer.entry}`;
  history.replaceState({ own: true }, "", `#${question.id}${link}`);
  if (answer.verdict.state !== "unknown") hint();
}

/** @param {import("./core.js").Fix} given */
function fix({ field, cell, text, unit }) {
  if (cell) {
    form?.boxes.get(field)?.cells?.put(cell, text);
    form?.focus(field, cell);
    return;
  }
  const numeric = question?.fields.some((each) => each.name === field && each.kind.type === "number");
  change({ [field]: text, ...(numeric ? { [unitName(field)]: unit } : {}) });
  form?.focus(field);
}

/** Puts in what an answer hands on, in one step. @param {import("./core.js").Offer} offer */
function take({ label, values }) {
  change(Object.fromEntries(values.flatMap(({ field, text, unit }) =>
    (unit ? [[field, text], [unitName(field), unit]] : [[field, text]]))));
  byId("verdict").focus();
  say(`${label}: done.`, { "Undo": () => travel("undo", "redo") });
}

/** What the calculator makes of some texts alone. @param {Entry} patch */
const read = (patch) => ask(question?.id ?? "", { [all.units_field]: units(), ...patch });

/** The entry with each table as it was read: whatever separated its cells, now tabs do.
 * @param {Question} of @param {Entry} given @returns {Entry} */
function tidied(of, given) {
  const tables = of.fields.filter((field) => columnsOf(field).length > 0 && given[field.name]);
  const said = tables.length > 0 ? new URLSearchParams(ask(of.id, given).entry) : new URLSearchParams();
  return { ...given, ...pick(Object.fromEntries(said), tables.flatMap(namesIn)) };
}

/** A unit typed behind the number moves into the list beside the box. @param {string} name */
function adopt(name) {
  const read = answer.read.find((each) => each.field === name);
  const typed = entry[name]?.trim();
  if (!typed || !read?.unit || !/\p{L}|[%°′″‰]/u.test(typed)) return false; // no unit was typed
  if (read.text === typed || answer.problems.some((each) => each.field === name)) return false;
  entry[name] = read.text;
  entry[unitName(name)] = read.unit;
  form?.write(entry);
  if (!earlier) keep();
  return true;
}

/** A field is done with. Showing what is wrong moves the page, so not under a finger. @param {string} name */
function left(name) {
  if (pressing) {
    document.addEventListener("click", () => left(name), { once: true });
    return;
  }
  // a finger's press is over before focus moves, and its click follows in the same task
  setTimeout(() => {
    if (waiting) refresh();
    visited.add(name);
    step = "";
    if (adopt(name)) refresh();
    else tell();
  });
}

/** Opens what the address says. */
function route() {
  const [id = "", ...rest] = location.hash.slice(1).split("?");
  const link = rest.join("?");
  question = all.questions.find((each) => each.id === id);
  byId("home").hidden = Boolean(question);
  byId("question").hidden = !question;
  document.title = question ? `${question.phrase} Farstaff` : "Farstaff";
  clearTimeout(settling);
  earlier = undefined;
  if (!question) {
    form = undefined;
    if (location.hash.length > 1) {
      keepAside("an address that names no question of this page", location.hash.slice(0, LINK_AT_MOST));
      showAsides();
      say("This address names no question of this page. It was kept aside.");
      history.replaceState(null, "", "#");
    }
    return;
  }
  visited.clear();
  tried = false;
  showStanding(question);
  entry = keptEntry(question);
  const around = { quantities: all.quantities, units, change, left, fix, end, read, stand };
  form = buildForm(question.fields, around, own().open, () => save(own()));
  show(entry);
  if (link && !history.state?.own) follow(question, link);
  else comeBack(false);
}

/** Notes at which row of a table the person works. @param {string} field @param {number} row */
function stand(field, row) {
  const kept = own();
  if (kept.place?.field === field && kept.place.row === row) return;
  kept.place = { field, row };
  save(kept);
}

/** Goes where the person stood, says how long ago that was, and after a long break asks what may have changed since.
 * @param {boolean} here the page was only out of sight */
function comeBack(here) {
  const { place, when = Date.now() } = own();
  const kind = question?.fields.find((field) => field.name === place?.field)?.kind;
  const pause = kind?.type === "table" ? kind.booking?.pause : undefined;
  const minutes = Math.floor((Date.now() - when) / 60_000);
  if (!place || !pause || (here && minutes < 1)) return;
  const long = minutes >= pause.after;
  const [count, unit] = minutes < 100 ? [minutes, "minute"] : [Math.round(minutes / 60), "hour"];
  const ago = minutes < 1 ? "" : `The last entry was ${count} ${unit}${count === 1 ? "" : "s"} ago.`;
  const answers = question?.fields.find((field) => field.name === pause.field)?.label ?? "";
  form?.boxes.get(place.field)?.cells?.stand(place.row, long ? `${ago} ${pause.text}` : ago, {
    ...(long ? { [answers]: () => form?.focus(pause.field) } : {}),
    "Go on": () => form?.focus(place.field, { row: place.row, column: 0 }),
  });
}

/** Shows the entry that a link brings, beside the person's own. @param {Question} of @param {string} link */
function follow(of, link) {
  const { known: given, unknown } = readLink(of, all.quantities, link);
  const known = tidied(of, given);
  if (unknown) {
    keepAside("part of a link that this page does not know", unknown);
    showAsides();
    say("Part of this link could not be read. It was kept aside.");
  }
  const mine = entry;
  const differs = ask(of.id, known).entry !== ask(of.id, mine).entry;
  if (!differs || Object.keys(known).length === 0) return;
  earlier = mine;
  show(known);
  for (const field of of.fields) adopt(field.name);
  if (Object.values(mine).every((text) => text === "")) {
    earlier = undefined;
    keep();
    return;
  }
  say("This entry came with the link. Yours is still kept.", {
    "Keep my earlier entry": () => { earlier = undefined; show(mine); },
    "Use this one": () => change({}),
  });
}

/** Enter in the last field: what is wrong is said, and the decision is read. */
function end() {
  tried = true;
  refresh();
  byId(byId("problems").hidden ? "verdict" : "problems").focus();
}

function again() {
  if (!question) return;
  const names = namesOf(question, false);
  change(Object.fromEntries(names.map((name) => [name, ""])));
  visited.clear();
  tried = false;
  refresh();
  say("The fields of this question are empty again.", { "Undo": () => travel("undo", "redo") });
}

function showAsides() {
  byId("kept-aside").hidden = asides.length === 0;
  /** @type {HTMLTextAreaElement} */ (byId("aside-text")).value = asideText();
}

/** Everything on the page that can be pressed and stands there from the start. */
function connect() {
  /** @param {string} id @param {() => void} act */
  const on = (id, act) => byId(id).addEventListener("click", act);
  byId("form").addEventListener("click", (event) => {
    const way = event.target instanceof HTMLElement ? event.target.dataset.travel : "";
    if (way === "undo") travel("undo", "redo");
    else if (way === "redo") travel("redo", "undo");
  });
  on("again", again);
  on("print", () => window.print());
  on("aside-save", () => download("farstaff-kept-aside.txt", asideText()));
  on("aside-drop", () => dropAsides().then(showAsides));
  byId("skip").addEventListener("click", (event) => { event.preventDefault(); byId("main").focus(); });
  byId("form").addEventListener("submit", (event) => event.preventDefault());
  for (const event of ["pointerdown", "pointerup", "pointercancel"]) {
    document.addEventListener(event, () => { pressing = event === "pointerdown"; }, true);
  }
  addEventListener("hashchange", route);
  document.addEventListener("visibilitychange", () => { if (document.visibilityState === "visible") comeBack(true); });
  addEventListener("beforeprint", () => {
    showAll();
    if (question) showEntered(question, entry, answer);
    byId("printed").textContent = new Date().toLocaleString(undefined, { dateStyle: "long", timeStyle: "long" });
    for (const details of byId("question").querySelectorAll("details")) details.open = true;
  });
}

/** The list of questions. A tap goes on at once, so that the phone lets the keyboard come up. */
function showHome() {
  byId("questions").replaceChildren(...all.questions.map(({ id, phrase, about }) => {
    const item = copy("t-question");
    const link = /** @type {HTMLAnchorElement} */ (within(item, "a"));
    link.href = `#${id}`;
    fill(item, "phrase", phrase);
    fill(item, "about", about);
    link.addEventListener("click", (event) => {
      if (event.ctrlKey || event.metaKey || event.shiftKey) return;
      event.preventDefault();
      history.pushState(null, "", link.href);
      scrollTo(0, 0);
      route();
      const first = question?.fields[0];
      if (first && !own().place) form?.focus(first.name);
    });
    return item;
  }));
  for (const link of document.querySelectorAll("[data-home], #home-link")) {
    link.addEventListener("click", (event) => {
      event.preventDefault();
      history.pushState(null, "", "#");
      route();
      scrollTo(0, 0);
      byId("main").focus();
    });
  }
}

/** The core's bytes: in the page itself where it is a single file. */
async function loadCore() {
  const inside = document.getElementById("wasm")?.textContent;
  if (inside) return init({ module_or_path: Uint8Array.from(atob(inside.trim()), (c) => c.charCodeAt(0)) });
  const url = "farstaff.wasm";
  try {
    const module = await WebAssembly.compileStreaming(fetch(url));
    return await init({ module_or_path: module });
  } catch { // a host that names the type wrongly
    return init({ module_or_path: await (await fetch(url)).arrayBuffer() });
  }
}

/** @param {unknown} error */
function trouble(error) {
  const name = error instanceof DOMException ? error.name : "";
  if (name === "QuotaExceededError") say("This device is full: what you type stays but is not saved. Free some space.");
  else if (name === "VersionError") say("A newer version of this page has been used here. Reload the page.");
  else say("What you type stays here but cannot be saved on this device. Print it or copy the address to keep it.");
}

async function start() {
  startRestart();
  startSettings();
  startHint();
  connect();
  const store = openStore({
    trouble,
    damaged: () => say("A saved entry was damaged. It was kept aside."),
    changed: () => { // by another tab; not under the hands of someone who types
      if (question && !byId("form").contains(document.activeElement)) show(keptEntry(question));
    },
  });
  await loadCore();
  all = catalogue();
  const late = await Promise.race([store, new Promise((done) => setTimeout(() => done("late"), STORE_MS))]) === "late";
  if (late) {
    say("What was saved on this device cannot be read yet. You can work; nothing that was saved is lost.");
    store.then(() => { // with what was typed meanwhile on top
      showAsides();
      if (question) show({ ...keptEntry(question), ...entry });
    });
  }
  showAsides();
  showHome();
  route();
  document.documentElement.dataset.ready = "1";
  await startOffline(saved);
}

start().catch((error) => {
  say("The calculator did not start. Reload the page, with signal if you can.");
  throw error;
});
