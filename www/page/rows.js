// The text of a table, line by line: a tab between cells, `~` before a row that was struck. A line of the page's own ends
// in a tab: so even one cell is told apart from a text that was pasted, and a row of words from a line of headings.
import { infoOf, unitName, usualUnit } from "./field.js";

/** @typedef {import("./field.js").Field} Field */
/** @typedef {import("./field.js").Entry} Entry */
/** @typedef {import("./field.js").Around} Around */
/** @typedef {import("./core.js").QuantityInfo} QuantityInfo */
/**
 * A column: its field, the name its unit travels under, that unit, and whether it is in sight.
 * @typedef {{ field: Field, unitName: string, info: QuantityInfo | undefined, unit: string, asked: boolean }} Column
 */

const STRUCK = /^ *~/;

/** @param {string} line */
export const isStruck = (line) => STRUCK.test(line);

/** @param {string} line */
export const cellsOf = (line) => line.replace(STRUCK, "").replace(/\t+$/, "").split("\t");

/** @param {readonly string[]} cells @param {boolean} struck */
export const lineOf = (cells, struck) =>
  `${struck ? "~" : ""}${cells.map((cell) => cell.replace(/[\t\r\n]+/g, " ")).join("\t").replace(/\t+$/, "")}\t`;

/** @param {string} line */
export const isBlank = (line) => line === "\t";

/** The lines of a text, as this page writes them. @param {string} text */
export const linesOf = (text) => (text === "" ? [] : text.split(/\r\n|\r|\n/).map((line) => lineOf(cellsOf(line), isStruck(line))));

/** @param {Field} field @param {Around} around @returns {Column[]} */
export const columnsOfTable = (field, around) => field.kind.type !== "table" ? [] : field.kind.columns.map((column) => {
  const info = infoOf(around.quantities, column);
  return { field: column, unitName: unitName(`${field.name}.${column.name}`), info, unit: info ? usualUnit(info, around.units()) : "", asked: true };
});

/** The words on a column: its label, and the unit of the numbers in it. @param {Pick<Column, "field" | "unit">} column */
export const heading = ({ field, unit }) => (unit ? `${field.label}, ${unit}` : field.label);

/** The option of a column that a text means, as the calculator takes it: by value or by label.
 * @param {Field} field @param {string} text */
export function optionOf({ kind }, text) {
  const meant = text.trim().toLowerCase();
  return kind.type !== "choice" ? undefined
    : kind.options.find(({ value, label }) => [value, label].some((each) => each.toLowerCase() === meant));
}

/** A cell as it is shown: the words of a choice, else what was typed. @param {Field} column @param {string} [text] */
export const shown = (column, text = "") => optionOf(column, text)?.label ?? text;

/**
 * Where two lists of lines begin to differ and where they end to: what lies between is all that has to be written anew.
 * @param {readonly string[]} old @param {readonly string[]} now
 */
export function changedBetween(old, now) {
  let start = 0;
  while (start < old.length && start < now.length && old[start] === now[start]) start += 1;
  let same = 0;
  while (same < old.length - start && same < now.length - start
    && old[old.length - 1 - same] === now[now.length - 1 - same]) same += 1;
  return { start, oldEnd: old.length - same, nowEnd: now.length - same };
}

/**
 * The rows as a file of separated values (RFC 4180), headings first.
 * @param {readonly Column[]} columns @param {readonly string[]} lines
 * @param {"," | ";"} separator semicolons go with decimal commas, commas with points
 */
export function separated(columns, lines, separator) {
  const [wanted, other] = separator === ";" ? [",", "."] : [".", ","];
  /** Only a plain number changes its sign of decimals: one sign, and digits around it.
   * @param {string} text @param {Column | undefined} column */
  const local = (text, column) => {
    const plain = column?.field.kind.type === "number" && /^[-−–+]?\d*[.,]\d+(?=$|[^\d.,])/.test(text);
    return (plain ? text.replace(other, wanted) : text).replace(/^[−–](?=[\d.,])/, "-");
  };
  /** @param {string} text */
  const quoted = (text) => (/[",;\n\t]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text);
  const head = columns.map(({ field, unit }) => (unit ? `${field.label} (${unit})` : field.label));
  const rows = lines.map((line) => {
    const cells = cellsOf(line).map((text, at) => local(text, columns[at]));
    return isStruck(line) ? [`~${cells[0] ?? ""}`, ...cells.slice(1)] : cells;
  });
  return [head, ...rows].map((cells) => cells.map(quoted).join(separator)).join("\r\n") + "\r\n";
}
