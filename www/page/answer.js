// Shows an answer, top down: the decision, what has to be put right, the numbers, the picture, what it all rests on.
import { byId, copy, fill, fixKeys, key, within } from "./dom.js";
import { unitName } from "./field.js";
import { drawFigure } from "./figure.js";
import { cellsOf, heading, isStruck, linesOf, shown } from "./rows.js";

/** @typedef {import("./core.js").Answer} Answer */
/** @typedef {import("./core.js").Question} Question */
/** @typedef {import("./core.js").Table} Table */
/** @typedef {import("./core.js").Note} Note */
/** @typedef {import("./core.js").Problem} Problem */
/** @typedef {import("./core.js").Fix} Fix */
/** @typedef {import("./core.js").Offer} Offer */
/** @typedef {import("./core.js").Cell} Cell */

const PAUSE_MS = 80; // between keys: the decision is there at once, what it rests on when the keys pause
let resting = 0;
let rest = () => {};
let restOf = ""; // whose it is

/**
 * @param {Question} question @param {Answer} answer
 * @param {Problem[]} problems those that may be shown now
 * @param {{ fix: (fix: Fix) => void, take: (offer: Offer) => void, focus: (field: string, cell?: Cell) => void }} act
 */
export function showAnswer(question, answer, problems, act) {
  showVerdict(answer);
  showProblems(question, problems, act);
  clearTimeout(resting);
  // The same entry has the same answer: what stands there already keeps its place, and the keyboard its own.
  const of = `${question.id}?${answer.entry}`;
  if (of === restOf) {
    rest = () => {};
    return;
  }
  rest = () => {
    rest = () => {};
    restOf = of;
    showRest(answer, act);
  };
  const starting = !document.documentElement.dataset.ready; // the first picture comes before what can wait
  if (starting || byId("form").contains(document.activeElement)) resting = setTimeout(() => rest(), PAUSE_MS);
  else rest();
}

/** Shows now what waits for a pause: before it is printed, say. */
export function showAll() {
  clearTimeout(resting);
  rest();
}

/** What the decision rests on.
 * @param {Answer} answer @param {{ fix: (fix: Fix) => void, take: (offer: Offer) => void }} act */
function showRest(answer, { fix, take }) {
  showList("results", "dl", answer.results.filter((each) => !each.idle).map(result));
  showList("idle", "dl", answer.results.filter((each) => each.idle).map(result));
  showList("offers", "ul", answer.offers.map((offer) => {
    const item = copy("t-note");
    within(item, "p").textContent = offer.text;
    within(item, ".keys").append(key(offer.label, () => take(offer)));
    return item;
  }));
  const behind = answer.tables.filter((each) => each.name === answer.figure?.table);
  showList("tables", "", answer.tables.filter((each) => !behind.includes(each)).map(table));
  showFigure(answer, behind);
  showList("working", "ol", answer.working.map(line));
  const told = answer.notes.filter((note) => note.fixes.length === 0); // what is asked back stands at its field
  showList("notes", "ul", told.map((each) => noteItem(each, fix)));
}

/** What stays the same for every answer of a question. @param {Question} question */
export function showStanding(question) {
  byId("phrase").textContent = question.phrase;
  showList("cautions", "ul", question.cautions.map((caution) => {
    const item = copy("t-caution");
    fill(item, "text", caution.text);
    fill(item, "by", caution.governed_by && `Governed by: ${caution.governed_by}`);
    return item;
  }));
  showList("sources", "ul", question.sources.map(line));
}

/** The decision as it is read out. @param {Answer} answer */
export const spoken = ({ verdict }) => `${verdict.word} ${verdict.number}. ${verdict.sentence}`.trim();

/** @param {Answer} answer */
function showVerdict({ verdict }) {
  const bar = byId("verdict");
  bar.dataset.state = verdict.state;
  byId("shape").setAttribute("href", `#shape-${verdict.state}`);
  byId("word").textContent = verdict.word || (bar.dataset.empty ?? "");
  byId("number").textContent = verdict.number;
  byId("sentence").textContent = verdict.sentence;
}

/** Fills a list and hides its section where there is nothing to show.
 * @param {string} id @param {string} list @param {HTMLElement[]} items */
function showList(id, list, items) {
  const section = byId(id);
  (list ? within(section, list) : section).replaceChildren(...items);
  section.hidden = items.length === 0;
}

/** @param {string} text */
function line(text) {
  const item = document.createElement("li");
  item.textContent = text;
  return item;
}

/**
 * @param {Question} question @param {Problem[]} problems
 * @param {{ fix: (fix: Fix) => void, focus: (field: string, cell?: Cell) => void }} act
 */
function showProblems(question, problems, act) {
  showList("problems", "ul", problems.map((problem) => {
    const item = copy("t-problem");
    const link = /** @type {HTMLAnchorElement} */ (within(item, "a"));
    link.href = `#field-${problem.field}`;
    const label = question.fields.find((field) => field.name === problem.field)?.label;
    link.textContent = problem.message;
    if (label) link.title = label;
    link.addEventListener("click", (event) => {
      event.preventDefault();
      act.focus(problem.field, problem.cell);
    });
    fixKeys(within(item, ".keys"), problem.fixes, act.fix);
    return item;
  }));
}

/** Value, then its doubt apart from it, then what it means. @param {Answer["results"][number]} outcome */
function result(outcome) {
  const item = copy("t-result");
  within(item, "dt").textContent = outcome.label;
  fill(item, "text", outcome.text);
  fill(item, "unit", outcome.unit);
  fill(item, "doubt", outcome.doubt ? `${outcome.doubt.text} ${outcome.unit}`.trim() : "");
  within(item, ".doubt").hidden = !outcome.doubt;
  fill(item, "meaning", outcome.meaning);
  return item;
}

/** @param {Table} data */
export function table(data) {
  const box = copy("t-table");
  const caption = within(box, "caption");
  caption.textContent = data.caption;
  box.setAttribute("aria-label", data.caption);
  // Figures stand under each other, words begin together.
  const figures = data.columns.map((_, column) => data.rows.some((row) => /^[−+±]?\d/.test(row[column] ?? "")));
  /** @param {string[]} texts @param {"th" | "td"} kind @param {string} scope of the first, or of all headings */
  const cells = (texts, kind, scope) => texts.map((text, column) => {
    const made = document.createElement(column === 0 ? "th" : kind);
    made.textContent = text;
    if (made.tagName === "TH") made.setAttribute("scope", scope);
    made.classList.toggle("figures", figures[column]);
    return made;
  });
  within(box, "thead tr").append(...cells(data.columns, "th", "col"));
  for (const texts of data.rows) {
    const row = document.createElement("tr");
    row.append(...cells(texts, "td", "row"));
    within(box, "tbody").append(row);
  }
  return box;
}

/** @param {Note} note @param {(fix: Fix) => void} apply */
function noteItem(note, apply) {
  const item = copy("t-note");
  item.dataset.level = note.level;
  within(item, "p").textContent = note.text;
  fixKeys(within(item, ".keys"), note.fixes, apply);
  return item;
}

/** @param {Answer} answer @param {Table[]} behind */
function showFigure({ figure }, behind) {
  const host = byId("figure");
  host.hidden = !figure;
  if (!figure) return;
  within(host, "figcaption").textContent = figure.title;
  fill(host, "x", figure.x.label);
  fill(host, "y", figure.y.label);
  fill(host, "note", figure.note);
  drawFigure(figure, byId("drawing"), within(host, ".legend"));
  const data = byId("figure-data");
  within(data, "div").replaceChildren(...behind.map(table));
  data.hidden = behind.length === 0;
}

/**
 * The entry as lines of text and tables, for the printed sheet: boxes clip what they hold.
 * @param {Question} question @param {Record<string, string>} entry @param {Answer} answer
 */
export function showEntered(question, entry, answer) {
  /** @type {HTMLElement[]} */
  const tables = [];
  byId("entered").replaceChildren(...question.fields.flatMap((field) => {
    const { name, label, kind } = field;
    const read = answer.read.find((each) => each.field === name);
    const text = read?.text || (read?.assumed ? field.default : entry[name]);
    if (!text) return [];
    if (kind.type === "table") {
      const units = new URLSearchParams(answer.entry);
      const columns = kind.columns.map((column) =>
        ({ field: column, unit: units.get(unitName(`${name}.${column.name}`)) ?? "" }));
      tables.push(rowsTable(label, columns, linesOf(text)).box);
      return [line(`${label}: ${read?.echo}`)];
    }
    const options = kind.type === "choice" ? kind.options : [];
    const words = options.find((option) => option.value === text)?.label ?? text;
    const said = [words, read?.text && read.unit, read?.assumed && "(assumed)", !read && "(not read)"];
    return [line(`${label}: ${said.filter(Boolean).join(" ")}`)];
  }));
  byId("entered-tables").replaceChildren(...tables);
}

/**
 * Rows of a field as a table to be read. A column that holds nothing is left out, unless it must be filled.
 * @param {string} caption @param {readonly Pick<import("./rows.js").Column, "field" | "unit">[]} columns
 * @param {readonly string[]} lines @param {readonly number[]} [which] those that are shown
 */
export function rowsTable(caption, columns, lines, which = [...lines.keys()]) {
  const cells = which.map((at) => cellsOf(lines[at] ?? ""));
  const used = columns.flatMap((column, at) => (column.field.required || cells.some((row) => row[at]) ? [{ column, at }] : []));
  const box = table({
    name: "", caption, columns: ["No.", ...used.map(({ column }) => heading(column))],
    rows: cells.map((row, index) => [String((which[index] ?? 0) + 1),
      ...used.map(({ column, at }) => shown(column.field, row[at]))]),
  });
  const rows = box.querySelectorAll("tbody tr");
  which.forEach((at, index) => rows[index]?.classList.toggle("struck", isStruck(lines[at] ?? "")));
  /** @param {import("./core.js").Cell} cell */
  const cellAt = ({ row, column }) => rows[which.indexOf(row)]?.children[used.findIndex(({ at }) => at === column) + 1];
  return { box, cellAt };
}
