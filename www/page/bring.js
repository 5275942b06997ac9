// Brings rows in from a paste or a file: the calculator reads them, the person sees what it made of them, and one key
// puts them in, one undo takes them out again.
import { rowsTable } from "./answer.js";
import { copy, fill, key, within } from "./dom.js";
import { cellsOf, heading, isBlank, isStruck, lineOf, linesOf } from "./rows.js";

/** @typedef {import("./rows.js").Column} Column */
/** @typedef {import("./core.js").Problem} Problem */
/**
 * @typedef {object} Into the table that the rows go into
 * @property {import("./field.js").Field} field
 * @property {import("./field.js").Around} around
 * @property {readonly Column[]} columns
 * @property {string} row a row in the words of the trade
 * @property {() => number} at the row in view; past the last one where none is
 * @property {() => readonly string[]} lines
 * @property {(lines: string[], units: Record<string, string>, first: number) => void} take
 */

const SHOWN = 4; // rows at the start that are shown, and as many more where something is wrong
const EDITED = 50_000; // characters that are put into the box; more are kept beside it
const FILE_AT_MOST = 20_000_000; // bytes

/**
 * The text of a file, which says in no way how its letters are coded.
 * @param {File} file
 */
async function textOf(file) {
  const bytes = new Uint8Array(await file.arrayBuffer());
  const [a, b] = bytes;
  if (a === 0xff && b === 0xfe) return new TextDecoder("utf-16le").decode(bytes);
  if (a === 0xfe && b === 0xff) return new TextDecoder("utf-16be").decode(bytes);
  try {
    return new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch {
    return new TextDecoder("windows-1252").decode(bytes);
  }
}

/**
 * A block that goes in from a later column on: its cells move there. The tab after a lone cell says that it is one,
 * whatever commas it holds.
 * @param {string} text @param {number} column @param {boolean} alone one cell in each line
 */
function moved(text, column, alone) {
  if (!alone && !text.includes("\t")) return text;
  const [before, after] = ["\t".repeat(column), alone ? "\t" : ""];
  return text.trimEnd().split(/\r\n|\r|\n/).map((line) => before + line + after).join("\n");
}

/**
 * The rows as they go in among others: a number keeps the unit it was read in where the column has another.
 * @param {readonly string[]} lines @param {readonly Column[]} columns @param {readonly string[]} units
 */
const withUnits = (lines, columns, units) => lines.map((line) => lineOf(cellsOf(line).map((cell, at) => {
  const unit = units[at] ?? "";
  const bare = cell !== "" && !/\p{L}|[%°′″‰]/u.test(cell);
  return bare && unit !== "" && unit !== columns[at]?.unit ? `${cell} ${unit}` : cell;
}), isStruck(line)));

/** One row written over another: what is empty changes nothing. @param {string} old @param {string} line */
function over(old, line) {
  const cells = cellsOf(old);
  cellsOf(line).forEach((cell, at) => {
    while (cells.length <= at) cells.push("");
    if (cell !== "") cells[at] = cell;
  });
  return lineOf(cells, isStruck(old) || isStruck(line));
}

/** What brings rows in: a text, and the column it was pasted at. @param {Into} into @returns {(text: string, column: number) => void} */
export function startBringing(into) {
  const { field, around, columns, row } = into;

  return (pasted, column) => {
    const dialog = /** @type {HTMLDialogElement} */ (copy("t-bring"));
    const area = /** @type {HTMLTextAreaElement} */ (within(dialog, "textarea"));
    const file = /** @type {HTMLInputElement} */ (within(dialog, "[type=file]"));
    const one = /** @type {HTMLInputElement} */ (within(dialog, "[type=checkbox]"));
    const oneKey = within(dialog, ".choice");
    let text = "";
    one.checked = column > 0; // a spreadsheet copies a single column without any sign between cells
    fill(dialog, "head", `Rows for: ${field.label}`);

    /** @param {string} given @param {string} [from] */
    function give(given, from = "") {
      area.value = given.length > EDITED ? "" : given;
      fill(dialog, "from", from || (given.length > EDITED ? "The text is too long to be shown here." : ""));
      read(given);
    }

    /** @param {string} given */
    function read(given) {
      text = given;
      oneKey.hidden = text.trim() === "" || /[\t;]/.test(text);
      look(moved(text, column, one.checked && !oneKey.hidden));
    }

    /** @param {string} text */
    function look(text) {
      const given = Object.fromEntries(columns.map((each) => [each.unitName, each.unit]));
      const answer = around.read({ ...given, [field.name]: text });
      const known = new Set(around.read({}).notes.map((note) => note.text));
      const entry = new URLSearchParams(answer.entry);
      const units = columns.map((each) => entry.get(each.unitName) ?? each.unit);
      const echo = answer.read.find((each) => each.field === field.name)?.echo ?? "";
      const lines = echo === "" ? [] : linesOf(entry.get(field.name) ?? ""); // nothing, or no table: it is not taken
      // Pasted at a later column, the rows that are there may hold what these lack.
      const problems = answer.problems.filter((each) => each.field === field.name && text.trim() !== ""
        && (column === 0 || !each.cell || cellsOf(lines[each.cell.row] ?? "")[each.cell.column]));
      fill(dialog, "order", lines.length > 0 ? ""
        : `Columns in this order, unless headings name them: ${columns.map(heading).join("; ")}.`);
      within(dialog, "[data-x=notes]").replaceChildren(...answer.notes.filter((note) => !known.has(note.text))
        .map((note) => item(note.text)));
      within(dialog, "[data-x=problems]").replaceChildren(...problems.map((problem) => item(problem.message)));
      within(dialog, ".preview").replaceChildren(...(lines.length > 0 ? [preview(lines, units, problems, echo)] : []));
      within(dialog, ".ways").replaceChildren(...(lines.length > 0 ? ways(lines, units) : []));
    }

    /** Keys for where the rows may go. @param {string[]} lines @param {string[]} units */
    function ways(lines, units) {
      const old = into.lines();
      const at = into.at();
      const now = withUnits(lines, columns, units);
      /** @param {string} words @param {string[]} all @param {number} first @param {boolean} [own] with their own units */
      const way = (words, all, first, own = false) => key(words, () => {
        dialog.close();
        const named = columns.map((each, index) => [each.unitName, units[index] ?? ""]);
        into.take(all, own ? Object.fromEntries(named.filter(([, unit]) => unit !== "")) : {}, first);
      });
      if (old.every(isBlank)) return [way("Take these rows", lines, 0, true)];
      const here = old[at];
      const from = here === undefined || isBlank(here) ? at : at + 1;
      const rest = old.slice(here !== undefined && isBlank(here) ? at + 1 : from);
      const place = from < old.length ? `Insert below ${row} ${from}` : `Add below ${row} ${old.length}`;
      const keys = [way(place, [...old.slice(0, from), ...now, ...rest], from)];
      if (here !== undefined) {
        const written = [...old, ...now.slice(old.length - at)].map((line, index) =>
          (index >= at && index < old.length && now[index - at] !== undefined ? over(line, now[index - at] ?? "") : line));
        keys.push(way(`Write over, from ${row} ${at + 1} on`, written, at));
      }
      keys.push(way(`Put in place of all ${old.length}`, lines, 0, true));
      return column > 0 && keys[1] ? [keys[1], ...keys.filter((_, index) => index !== 1)] : keys;
    }

    /** @param {string[]} lines @param {string[]} units @param {Problem[]} problems @param {string} echo */
    function preview(lines, units, problems, echo) {
      const wrong = problems.flatMap(({ cell }) => (cell ? [cell] : []));
      const some = new Set([...lines.keys()].slice(0, SHOWN));
      for (const cell of wrong.slice(0, SHOWN)) some.add(cell.row);
      const rows = [...some].filter((at) => at < lines.length);
      const said = columns.map(({ field: of }, at) => ({ field: of, unit: units[at] ?? "" }));
      const { box: made, cellAt } = rowsTable(`As read: ${echo}`, said, lines, rows);
      for (const cell of wrong) cellAt(cell)?.classList.add("off");
      if (rows.length < lines.length) made.append(item(`and ${lines.length - rows.length} more`, "p"));
      return made;
    }

    area.addEventListener("input", () => { fill(dialog, "from", ""); read(area.value); });
    one.addEventListener("change", () => read(text));
    within(dialog, "[data-do=file]").addEventListener("click", () => file.click());
    file.addEventListener("change", async () => {
      const chosen = file.files?.[0];
      if (!chosen) return;
      if (chosen.size > FILE_AT_MOST) give("", `${chosen.name} is too large: 20 MB at most.`);
      else give(await textOf(chosen), `From ${chosen.name}`);
    });
    within(dialog, "[data-do=leave]").addEventListener("click", () => dialog.close());
    dialog.onclose = () => dialog.remove();
    document.body.append(dialog);
    dialog.showModal();
    give(pasted);
    if (pasted) dialog.querySelector(/** @type {"button"} */ (".ways button"))?.focus();
  };
}

/** @param {string} text @param {"li" | "p"} [tag] */
function item(text, tag = "li") {
  const made = document.createElement(tag);
  made.textContent = text;
  return made;
}
