// What every kind of field on the page shares: how its texts are named, its words, its list of units, its ± key.
import { copy, within } from "./dom.js";

/** @typedef {import("./core.js").Field} Field */
/** @typedef {import("./core.js").Fix} Fix */
/** @typedef {import("./core.js").Cell} Cell */
/** @typedef {import("./core.js").Problem} Problem */
/** @typedef {import("./core.js").QuantityInfo} QuantityInfo */
/** @typedef {Record<string, string>} Entry */
/**
 * What a form needs to know of the rest.
 * @typedef {object} Around
 * @property {readonly QuantityInfo[]} quantities
 * @property {() => string} units the choice of units in force
 * @property {(patch: Entry, step: string) => void} change texts by name; changes of one step are undone together
 * @property {(name: string) => void} left a field is done with, for now
 * @property {(fix: Fix) => void} fix
 * @property {() => void} end Enter in the last field
 * @property {(patch: Entry) => import("./core.js").Answer} read what the core makes of these texts alone
 * @property {(field: string, row: number) => void} stand the person works at this row of a table
 */
/**
 * One field on the page.
 * @typedef {object} Box
 * @property {Field} field
 * @property {HTMLElement} root
 * @property {(entry: Entry) => void} write shows an entry
 * @property {() => HTMLElement} target what is focused
 * @property {Cells} [cells] where it has any
 */
/**
 * What a table does beside.
 * @typedef {object} Cells
 * @property {(cell: Cell) => void} focus
 * @property {(cell: Cell, text: string) => void} put
 * @property {(cell: Cell) => boolean} ripe what is wrong there may be said now
 * @property {(problems: Problem[], read: import("./core.js").Read[]) => void} tell shows what is wrong where, and the columns asked
 * @property {(rows: readonly import("./core.js").AtRow[]) => void} rows shows what is to be said at rows
 * @property {(row: number, text: string, keys: Record<string, () => void>) => void} stand opens a row where someone comes
 *   back to, and says something there
 */

/** Name under which the unit picked beside a box, or over a column, travels. @param {string} name */
export const unitName = (name) => `${name}.unit`;

/** @param {Field} field @returns {readonly Field[]} */
export const columnsOf = ({ kind }) => (kind.type === "table" ? kind.columns : []);

/** The unit names of a field, each with what it is the unit of. @param {Field} field @returns {[string, Field][]} */
export const unitsOf = (field) => [
  [unitName(field.name), field],
  ...columnsOf(field).map((column) => /** @type {[string, Field]} */ ([unitName(`${field.name}.${column.name}`), column])),
];

/** Every name under which a field has texts. @param {Field} field */
export const namesIn = (field) => [field.name, ...unitsOf(field).map(([name]) => name)];

/** @param {readonly QuantityInfo[]} quantities @param {Field} field */
export const infoOf = (quantities, { kind }) =>
  (kind.type === "number" ? quantities.find((each) => each.name === kind.quantity) : undefined);

/** Whether it is asked: the choice it hangs on, if any, was read so. @param {Field} field @param {readonly import("./core.js").Read[]} read */
export const isAsked = ({ when }, read) =>
  !when || when.values.includes(read.find((each) => each.field === when.field)?.text ?? "");

/** The unit a bare number has. @param {QuantityInfo} info @param {string} units */
export const usualUnit = (info, units) => /** @type {any} */ (info)[units] ?? info.metric;

/** What is meant, and what is assumed where nothing is entered. @param {Field} field */
export function helpOf({ help, kind, default: assumed }) {
  const left = assumed && kind.type === "number" ? `Left empty: ${assumed}.` : "";
  return [help, left].filter(Boolean).join(" ");
}

/**
 * Label, help, error and echo, and what ties them to the control.
 * @param {HTMLElement} root @param {Field} field @param {HTMLElement} control
 */
export function dress(root, field, control) {
  const id = `field-${field.name}`;
  const label = within(root, "label, legend");
  label.textContent = field.label;
  const help = within(root, ".help");
  help.textContent = helpOf(field);
  help.hidden = help.textContent === "";
  help.id = `${id}-help`;
  within(root, ".error p").id = `${id}-error`;
  within(root, ".echo").id = `${id}-echo`;
  root.append(copy("t-ask"));
  control.setAttribute("aria-describedby", `${id}-help ${id}-error ${id}-echo`);
  if (label instanceof HTMLLabelElement) {
    control.id = id;
    label.htmlFor = id;
  }
}

/**
 * Fills a list of units. Closed, it shows the symbol only; opened, the words too, so that k and m are not taken for each
 * other.
 * @param {HTMLSelectElement} select @param {QuantityInfo | undefined} info
 */
export function fillUnits(select, info) {
  const options = (info?.units ?? []).map(({ symbol, label }) => {
    const option = new Option(symbol, symbol);
    for (const event of ["pointerdown", "focus"]) {
      select.addEventListener(event, () => { option.text = `${symbol}  (${label})`; });
    }
    for (const event of ["blur", "change"]) select.addEventListener(event, () => { option.text = symbol; });
    return option;
  });
  select.append(...options);
  select.hidden = options.length === 0;
}

/**
 * The ± key beside a box.
 * @param {HTMLElement} sign @param {HTMLInputElement} input @param {() => void} changed
 */
export function startSign(sign, input, changed) {
  sign.addEventListener("pointerdown", (event) => event.preventDefault()); // keeps focus and keyboard where they are
  sign.addEventListener("click", () => {
    if (input.readOnly) return;
    const text = input.value.trim();
    input.value = /^[-−–]/.test(text) ? text.slice(1).trimStart() : `−${text}`;
    changed();
  });
}
